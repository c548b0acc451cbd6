import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'

const client = fileURLToPath(new URL('../../client', import.meta.url))
const sources = readdirSync(client, { recursive: true, encoding: 'utf8' }).filter((path) => /\.tsx?$/.test(path))

/** An effect in one expression gives its value back to React, which calls it when the component goes. */
const returnsSomething = /useEffect\(\s*\(\) => (?!\{|void |\(\) =>|\()/

describe('effects', () => {
  it('never hand React something to call that is no clean-up (Chromium answers scrollIntoView with a promise)', () => {
    const faults = sources.filter((path) => returnsSomething.test(readFileSync(join(client, path), 'utf8')))
    expect(faults).toEqual([])
  })

  it('would notice one', () => {
    expect(returnsSomething.test("useEffect(() => box.current?.scrollIntoView({ block: 'nearest' }), [])")).toBe(true)
    expect(returnsSomething.test('useEffect(() => void queue.wake(), [queue])')).toBe(false)
  })
})
