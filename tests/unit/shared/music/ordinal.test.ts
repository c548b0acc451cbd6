import { expect, it } from 'vitest'
import { ordinal } from '@shared/music/ordinal'

it('ends ordinals as they are said', () => {
  expect([1, 2, 3, 4, 11, 12, 13, 21, 22, 103, 111].map(ordinal).join(' ')).toBe(
    '1st 2nd 3rd 4th 11th 12th 13th 21st 22nd 103rd 111th'
  )
})
