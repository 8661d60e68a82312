import { describe, expect, it } from 'vitest'
import { OFFICE_KEYS, pageOfKey } from '@/lib/members/office-keys'

describe('pageOfKey', () => {
  it('leads where the role may go, and nowhere else', () => {
    expect(pageOfKey('t', 'crew')).toBe('/trees')
    expect(pageOfKey('m', 'crew')).toBe('/me')
    expect(pageOfKey('h', 'crew')).toBeNull()
    expect(pageOfKey('h', 'supervisor')).toBe('/history')
    expect(pageOfKey('x', 'owner')).toBeNull()
    expect(pageOfKey('constructor', 'owner')).toBeNull()
  })

  it('has a word for every page that it leads to', () => {
    const nameless = OFFICE_KEYS.filter(({ does, page }) => page !== undefined && does.includes('/'))
    expect(nameless).toEqual([])
  })
})
