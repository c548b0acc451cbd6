import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readTime, trimArguments, trimFault, trimmedName } from '@client/features/uploads/trim-plan'
import { bytesWords } from '@client/features/uploads/bytes-words'
import { titleOfFile } from '@client/features/uploads/check-file'
import { timeWords } from '@shared/timing/time-words'
import { limits } from '@shared/limits'

describe('readTime', () => {
  it('reads what the program writes, to the tenth', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 6 * 36_000 }), (tenths) => {
        expect(readTime(timeWords(tenths / 10))).toBeCloseTo(tenths / 10, 6)
      })
    )
  })
  it('reads seconds alone, hours, and a comma', () => {
    expect([readTime('83.4'), readTime('1:02:03'), readTime('0:03,5')]).toEqual([83.4, 3723, 3.5])
  })
  it('refuses what is no time', () => {
    expect(['', 'soon', '-1', '1:2:3:4', '1:'].map(readTime)).toEqual([null, null, null, null, null])
  })
})

describe('trimFault', () => {
  it('wants an end after a start that lies in the recording', () => {
    expect(trimFault(1, 2, 10)).toBeNull()
    expect(trimFault(2, 2, 10)).toMatch(/before the start/)
    expect(trimFault(11, 12, 10)).toMatch(/after the end/)
    expect(trimFault(null, 2, 10)).toMatch(/1:23.4/)
  })
})

describe('trimArguments', () => {
  // ffmpeg's documentation: -ss and -t before -i limit what is read of the input.
  it('cuts while reading and drops the tags', () => {
    const words = trimArguments({ span: { startSec: 1.5, endSec: 4 }, format: 'opus' }, 'in', 'out').join(' ')
    expect(words).toBe(
      '-ss 1.500 -t 2.500 -i in -vn -map 0:a:0 -map_metadata -1 -c:a libopus -b:a 128k -frame_duration 10 out'
    )
  })
  it('cuts nothing off when the whole is wanted', () => {
    expect(trimArguments({ span: null, format: 'aac' }, 'in', 'out')[0]).toBe('-i')
  })
  it('names the new file by what is in it', () => {
    expect(trimmedName('long rehearsal.wav', 'aac')).toBe('long rehearsal.m4a')
  })
})

describe('titleOfFile', () => {
  it('is never empty, never too long and on one line', () => {
    fc.assert(
      fc.property(fc.string(), (name) => {
        const title = titleOfFile(name)
        expect(title.trim()).not.toBe('')
        expect(title.length).toBeLessThanOrEqual(limits.title)
        expect(title).not.toMatch(/\p{Cc}/u)
      })
    )
  })
  it('leaves out the ending and joins words', () => {
    expect(titleOfFile('blues_in_the_kitchen.take2.WAV')).toBe('blues in the kitchen.take2')
  })
})

describe('bytesWords', () => {
  it('counts in 1024s', () => {
    expect([0, 1023, 1536, limits.uploadBytes].map(bytesWords)).toEqual(['0 bytes', '1023 bytes', '1.5 KB', '1 GB'])
  })
})
