import { afterAll, describe, expect, it } from 'vitest'
import { stoppedClock } from '@/tests/factories/shell-room'

// Read once by the program, so before anything asks for it.
process.env['SETUP_CODE'] = 'ABCD-EFGH-JKMN'
const { makeFirstOwner } = await import('@/lib/commands/make-first-owner')
const { Member } = await import('@/models')

afterAll(() => {
  delete process.env['SETUP_CODE']
})

const clock = stoppedClock()
const tryCode = (setupCode: string) =>
  makeFirstOwner(
    { name: 'Ada', email: 'ada@foundry.example', password: 'a hare and two otters', setupCode, timeZone: 'UTC' },
    { userAgent: '', clock, scryptCost: 16 },
  )

describe('the setup code', () => {
  it('is asked for, and a wrong one makes nobody an owner', async () => {
    for (const wrong of ['', 'ABCD', 'ABCD-EFGH-JKMP']) {
      await expect(tryCode(wrong)).rejects.toMatchObject({ code: 'conflict', extra: { fields: [{ path: 'setupCode' }] } })
    }
    expect(await Member.count()).toBe(0)
  })

  it('may be typed in small letters and without its dashes', async () => {
    await tryCode(' abcd efghjkmn ')
    expect(await Member.count()).toBe(1)
  })

  it('may be tried ten times a minute', async () => {
    const outcomes = []
    for (let count = 0; count < 12; count += 1) outcomes.push(await tryCode('wrong').catch((error: { code: string }) => error.code))
    expect(outcomes.slice(-5)).toEqual(Array.from({ length: 5 }, () => 'too_many_requests'))
  })
})
