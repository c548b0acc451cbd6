import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { ownPath } from '@client/features/account/own-path'

// OWASP ASVS 5.0, V3.7.2: no redirect to another site.
describe('ownPath', () => {
  it.each(['/takes/1?bars=9-12', '/groups/2/people', '/join#abc', '/takes/1?pass=2&bars=17-20'])('keeps %s', (path) => {
    expect(ownPath(path)).toBe(path)
  })

  it.each([
    'https://elsewhere.example/',
    '//elsewhere.example',
    '/\\elsewhere.example',
    '/\t/elsewhere.example',
    '/.//elsewhere.example',
    'javascript:alert(1)',
    'takes/1',
    '/sign-in?next=/sign-in',
    '',
    null
  ])('goes home instead of to %j', (next) => {
    expect(ownPath(next)).toBe('/')
  })

  it('never leaves the origin, whatever is asked for', () => {
    const piece = fc.constantFrom('/', '\\', '.', '..', '\t', '\n', '@', ':', 'x.example', '%2f', '?', '#', 'https:')
    fc.assert(
      fc.property(fc.array(piece, { maxLength: 8 }), (pieces) => {
        const gone = new URL(ownPath(`/${pieces.join('')}`), 'https://plumbline.example/sign-in')
        expect(gone.origin).toBe('https://plumbline.example')
      })
    )
  })
})
