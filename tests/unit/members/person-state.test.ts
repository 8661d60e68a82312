import { expect, it } from 'vitest'
import { personState } from '@/lib/members/person-state'

it('says how a member stands, to the millisecond', () => {
  const now = 1_000_000
  expect(personState({ disabledAt: null, firstPasswordUntil: null }, now)).toBe('active')
  expect(personState({ disabledAt: null, firstPasswordUntil: now + 1 }, now)).toBe('first password open')
  expect(personState({ disabledAt: null, firstPasswordUntil: now }, now)).toBe('first password over')
  expect(personState({ disabledAt: 5, firstPasswordUntil: now + 1 }, now)).toBe('disabled')
})
