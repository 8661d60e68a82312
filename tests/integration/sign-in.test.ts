import { beforeEach, describe, expect, it } from 'vitest'
import { forgetMemberTries } from '@/lib/commands/count-try'
import { endMemberSessions } from '@/lib/commands/end-member-sessions'
import { endSession } from '@/lib/commands/end-session'
import { SESSION_MS, signIn } from '@/lib/commands/sign-in'
import { newId } from '@/lib/core/ids'
import { SI_UNITS } from '@/lib/format/units'
import { signInSubject } from '@/lib/members/sign-in-waits'
import { sessionMember } from '@/tests/factories/session-member'
import { Member, Session, SignInWait } from '@/models'
import { seedMember, type SeededMember } from '@/tests/setup/server'

const SECOND = 1000
const START = Date.UTC(2026, 10, 30, 6)
let now = START
const clock = { now: () => now }
let member: SeededMember
let count = 0

const attempt = (email: string, password: string) => signIn({ email, password, userAgent: 'test', device: null }, { clock })
const attemptFrom = (device: string, password: string) => signIn({ email: member.email, password, userAgent: 'test', device }, { clock })
const fail = async (times: number, email = member.email) => {
  for (let index = 0; index < times; index += 1) expect(await attempt(email, 'wrong')).toEqual({ outcome: 'refused' })
}
async function enter(): Promise<string> {
  const result = await attempt(member.email, member.password)
  if (result.outcome !== 'signed in') throw new Error(result.outcome)
  return result.sessionId
}

beforeEach(async () => {
  now = START
  count += 1
  await SignInWait.destroy({ where: {} })
  member = await seedMember('operator', { email: `op${count}@kilnward.example` })
})

describe('waits', () => {
  it('let five failures pass, then double from 30 s to 15 min', async () => {
    await fail(5)
    for (const seconds of [30, 60, 120, 240, 480, 900, 900]) {
      expect(await attempt(member.email, 'wrong')).toEqual({ outcome: 'wait', waitSeconds: seconds })
      now += seconds * SECOND - 1
      expect(await attempt(member.email, 'wrong')).toEqual({ outcome: 'wait', waitSeconds: 1 })
      now += 1
      await fail(1)
    }
  })

  it('hold for the right password too', async () => {
    await fail(5)
    expect(await attempt(member.email, member.password)).toEqual({ outcome: 'wait', waitSeconds: 30 })
    now += 30 * SECOND
    await enter()
  })

  it('are not made longer by trying again meanwhile', async () => {
    await fail(5)
    for (let index = 0; index < 20; index += 1) await attempt(member.email, 'wrong')
    now += 30 * SECOND
    expect(await attempt(member.email, member.password)).toMatchObject({ outcome: 'signed in' })
  })

  it('are gone after a success', async () => {
    await fail(4)
    await enter()
    await fail(4)
    expect(await attempt(member.email, member.password)).toMatchObject({ outcome: 'signed in' })
  })

  it('are the same for an e-mail that nobody has', async () => {
    await fail(5, 'nobody@kilnward.example')
    expect(await attempt('nobody@kilnward.example', 'wrong')).toEqual({ outcome: 'wait', waitSeconds: 30 })
  })

  it('count one e-mail however it is written, and no other', async () => {
    await fail(3)
    await fail(2, ` ${member.email.toUpperCase()} `)
    expect(await attempt(member.email, 'wrong')).toMatchObject({ outcome: 'wait' })
    await fail(1, 'another@kilnward.example')
  })

  it('cannot be outrun by many tries at once', async () => {
    const results = await Promise.all(Array.from({ length: 40 }, () => attempt(member.email, 'wrong')))
    expect(results.filter(({ outcome }) => outcome === 'refused')).toHaveLength(5)
    expect(results.filter(({ outcome }) => outcome === 'wait')).toHaveLength(35)
  })

  it('of strangers do not hold for a known device, nor those of one device for another', async () => {
    await fail(5)
    expect(await attempt(member.email, member.password)).toMatchObject({ outcome: 'wait' })
    expect(await attemptFrom('tablet', member.password)).toMatchObject({ outcome: 'signed in' })
    // The stranger gains nothing by it.
    expect(await attempt(member.email, 'wrong')).toMatchObject({ outcome: 'wait' })
    for (let index = 0; index < 5; index += 1) expect(await attemptFrom('tablet', 'wrong')).toEqual({ outcome: 'refused' })
    expect(await attemptFrom('tablet', member.password)).toEqual({ outcome: 'wait', waitSeconds: 30 })
    expect(await attemptFrom('phone', member.password)).toMatchObject({ outcome: 'signed in' })
  })

  it('of one member alone are forgotten with a new password, from wherever they came', async () => {
    const id = newId()
    const subjects = (email: string) => [signInSubject(email, null), signInSubject(email, 'tablet'), signInSubject(email, 'phone')]
    const others = [...subjects('axb@kilnward.example'), ...subjects('a_b@kilnward.example.net'), ...subjects('_@kilnward.example')]
    for (const subject of [...subjects('a_b@kilnward.example'), `password:${id}`, ...others]) {
      await SignInWait.create({ subject, failures: 1, lastFailedAt: now, waitUntil: now })
    }
    await forgetMemberTries({ id, email: 'a_b@kilnward.example' })
    const left = (await SignInWait.findAll()).map(({ subject }) => subject)
    expect(left.toSorted()).toEqual(others.toSorted())
  })

  it('live in the records, so that a restart forgives nobody', async () => {
    await fail(5)
    expect((await SignInWait.findByPk(`member:${member.email}`))?.waitUntil).toBe(now + 30 * SECOND)
  })

  it('are forgotten after a day', async () => {
    await fail(5, 'nobody@kilnward.example')
    now += 24 * 3600 * SECOND
    await fail(1)
    expect(await SignInWait.findByPk('member:nobody@kilnward.example')).toBeNull()
  })
})

describe('a refusal', () => {
  it('is the same for a wrong password, an unknown e-mail and a disabled member', async () => {
    const gone = await seedMember('crew', { email: `gone${count}@kilnward.example` })
    await Member.update({ disabledAt: START }, { where: { id: gone.id } })
    expect(await attempt(member.email, 'wrong')).toEqual({ outcome: 'refused' })
    expect(await attempt('nobody@kilnward.example', 'wrong')).toEqual({ outcome: 'refused' })
    expect(await attempt(gone.email, gone.password)).toEqual({ outcome: 'refused' })
    const waits = await SignInWait.findAll()
    expect(waits.map(({ failures }) => failures)).toEqual([1, 1, 1])
  })

  it('opens no session', async () => {
    await attempt(member.email, 'wrong')
    expect(await Session.count({ where: { memberId: member.id } })).toBe(0)
  })
})

describe('a session', () => {
  it('belongs to the member for twelve hours, to the millisecond', async () => {
    const sessionId = await enter()
    now += SESSION_MS - 1
    expect(await sessionMember(sessionId, { clock })).toEqual({
      id: member.id,
      name: member.name,
      email: member.email,
      role: 'operator',
      sessionId,
      device: 'Unknown browser',
      isDemo: false,
      isFoundrySetUp: false,
      mustChangePassword: false,
      units: SI_UNITS,
    })
    now += 1
    expect(await sessionMember(sessionId, { clock })).toBeNull()
  })

  it('ends alone, or with all of its member', async () => {
    const [first, second, third] = [await enter(), await enter(), await enter()]
    await endSession(first, { clock })
    expect(await sessionMember(first, { clock })).toBeNull()
    expect(await sessionMember(second, { clock })).not.toBeNull()
    await endMemberSessions(member.id, { clock })
    expect(await sessionMember(second, { clock })).toBeNull()
    expect(await sessionMember(third, { clock })).toBeNull()
  })

  it('keeps the moment at which it first ended', async () => {
    const sessionId = await enter()
    await endSession(sessionId, { clock })
    now += SECOND
    await endSession(sessionId, { clock })
    expect((await Session.findByPk(sessionId))?.endedAt).toBe(START)
  })
})
