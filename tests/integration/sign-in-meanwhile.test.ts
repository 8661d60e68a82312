import { beforeEach, expect, it, vi } from 'vitest'
import { signIn } from '@/lib/commands/sign-in'
import type * as password from '@/lib/server/password'
import { Member, Session } from '@/models'
import { seedMember, type SeededMember } from '@/tests/setup/server'

/** What happens while the hash is being worked out. */
const meanwhile = vi.hoisted(() => ({ happens: async (): Promise<unknown> => undefined }))
vi.mock('@/lib/server/password', async (importOriginal) => {
  const original = await importOriginal<typeof password>()
  const isPasswordRight: typeof original.isPasswordRight = async (...args) => {
    const isRight = await original.isPasswordRight(...args)
    await meanwhile.happens()
    return isRight
  }
  return { ...original, isPasswordRight }
})

const clock = { now: () => Date.UTC(2026, 10, 30, 6) }
let member: SeededMember
let count = 0

beforeEach(async () => {
  count += 1
  member = await seedMember('operator', { email: `op${count}@kilnward.example` })
})

const attempt = () => signIn({ email: member.email, password: member.password, userAgent: 'test', device: null }, { clock })

it('signs in where nothing happens meanwhile', async () => {
  meanwhile.happens = async () => undefined
  expect(await attempt()).toMatchObject({ outcome: 'signed in' })
})

it.each([
  ['disabled', { disabledAt: clock.now() }],
  ['given another password', { passwordHash: `scrypt$16$8$1$${'a'.repeat(22)}$${'a'.repeat(43)}` }],
])('opens no session for a member who is %s while the password is looked at', async (_what, change) => {
  meanwhile.happens = () => Member.update(change, { where: { id: member.id } })
  expect(await attempt()).toEqual({ outcome: 'refused' })
  expect(await Session.count({ where: { memberId: member.id } })).toBe(0)
})
