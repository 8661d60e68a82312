import { expect, it } from 'vitest'
import { waitAfterFailuresMs } from '@/lib/members/sign-in-waits'

it('is nothing for four failures, 30 s from the fifth on, doubled up to 15 min', () => {
  const seconds = Array.from({ length: 13 }, (_, failures) => waitAfterFailuresMs(failures) / 1000)
  expect(seconds).toEqual([0, 0, 0, 0, 0, 30, 60, 120, 240, 480, 900, 900, 900])
})

it('stays at 15 min for any number', () => {
  expect(waitAfterFailuresMs(100_000)).toBe(900_000)
})
