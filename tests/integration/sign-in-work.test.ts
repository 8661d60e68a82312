import type * as nodeCrypto from 'node:crypto'
import { beforeEach, expect, it, vi } from 'vitest'
import { signIn } from '@/lib/commands/sign-in'
import { Member, SignInWait } from '@/models'
import { hashPassword, PASSWORD_COST } from '@/lib/server/password'
import { seedMember, type SeededMember } from '@/tests/setup/server'

/** Every hash that is worked out: with which N. */
const hashed = vi.hoisted((): number[] => [])
vi.mock('node:crypto', async (importOriginal) => {
  const original = await importOriginal<typeof nodeCrypto>()
  const scrypt = (...args: unknown[]) => {
    const [, , , options] = args
    if (typeof options === 'object' && options !== null && 'N' in options) hashed.push(Number(options.N))
    return Reflect.apply(original.scrypt, null, args)
  }
  return { ...original, scrypt }
})

const clock = { now: () => Date.UTC(2026, 10, 30, 6) }
let member: SeededMember
let count = 0

beforeEach(async () => {
  count += 1
  await SignInWait.destroy({ where: {} })
  member = await seedMember('operator', { email: `op${count}@kilnward.example` })
  // As the program itself stores one: at the full cost.
  await Member.update({ passwordHash: await hashPassword(member.password) }, { where: { id: member.id } })
  hashed.length = 0
})

const attempt = (email: string, password: string) => signIn({ email, password, userAgent: 'test', device: null }, { clock })

it('a wrong password, an unknown e-mail, a disabled member and a first password that ran out cost the same one hash', async () => {
  await attempt(member.email, 'wrong')
  await attempt('nobody@kilnward.example', 'wrong')
  await Member.update({ firstPasswordUntil: clock.now() }, { where: { id: member.id } })
  await attempt(member.email, 'wrong')
  await Member.update({ disabledAt: clock.now() }, { where: { id: member.id } })
  await attempt(member.email, member.password)
  expect(hashed).toEqual([PASSWORD_COST, PASSWORD_COST, PASSWORD_COST, PASSWORD_COST])
})

it('a try that has to wait costs none, known or not', async () => {
  for (const email of [member.email, 'nobody@kilnward.example']) {
    await SignInWait.create({ subject: `member:${email}`, failures: 5, lastFailedAt: clock.now(), waitUntil: clock.now() + 30_000 })
    expect(await attempt(email, member.password)).toEqual({ outcome: 'wait', waitSeconds: 30 })
  }
  expect(hashed).toEqual([])
})
