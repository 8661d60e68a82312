import { encode } from 'next-auth/jwt'
import { beforeAll, beforeEach, expect, it } from 'vitest'

const { knownSession, openCookie } = await import('@/lib/server/known-sessions')
const { memberAt } = await import('@/lib/queries/session-member')
const { endSession } = await import('@/lib/commands/end-session')
const { database, inTransaction, Member, Session } = await import('@/models')
const { newId } = await import('@/lib/core/ids')
const { buildFoundry, buildMember, NOW } = await import('@/tests/factories/shell-room')

const SECRET = 'a secret of the tests, long enough for the check'
let memberId: string
let sessionId: string
const clock = { now: () => NOW }

beforeAll(async () => {
  await buildFoundry()
  memberId = (await buildMember('operator')).id
})
beforeEach(async () => {
  sessionId = newId()
  await inTransaction(() => Session.create({ id: sessionId, memberId, userAgent: '', createdAt: NOW - 1000, expiresAt: NOW + 1000 }))
})

/** Statements that a piece of work sends to the database. */
async function statementsOf(work: () => Promise<unknown>): Promise<string[]> {
  const seen: string[] = []
  // Not in its types.
  const { options } = database as unknown as { options: { logging: false | ((sql: string) => void) } }
  options.logging = (sql) => void seen.push(sql)
  await work()
  options.logging = false
  return seen
}

it('costs one question to the records while nothing changes', async () => {
  await knownSession(sessionId)
  const statements = await statementsOf(() => knownSession(sessionId))
  expect(statements).toHaveLength(1)
  expect(statements[0]).toContain('data_version')
})

it('sees a changed role and an ended session on the next request', async () => {
  expect((await knownSession(sessionId))?.member.role).toBe('operator')
  await inTransaction(() => Member.update({ role: 'crew' }, { where: { id: memberId } }))
  expect((await knownSession(sessionId))?.member.role).toBe('crew')
  await endSession(sessionId, { clock })
  expect(await knownSession(sessionId)).toBeNull()
})

it('runs out by the clock, whatever is remembered', async () => {
  const known = await knownSession(sessionId)
  expect(memberAt(known, NOW + 999)?.id).toBe(memberId)
  expect(memberAt(known, NOW + 1000)).toBeNull()
})

it('opens cookies of this server, and no others', async () => {
  const cookie = await encode({ token: { sub: memberId, sid: sessionId }, secret: SECRET, maxAge: 60 })
  expect(await openCookie(cookie, SECRET)).toMatchObject({ sid: sessionId })
  expect(await openCookie(cookie, SECRET)).toMatchObject({ sid: sessionId })
  const foreign = await encode({
    token: { sub: memberId, sid: sessionId },
    secret: 'another secret, just as long as the first one',
    maxAge: 60,
  })
  expect(await openCookie(foreign, SECRET)).toBeNull()
  expect(await openCookie(`${cookie}x`, SECRET)).toBeNull()
})
