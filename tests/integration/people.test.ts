import { beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { addMember } from '@/lib/commands/add-member'
import { changePassword } from '@/lib/commands/change-password'
import { disableMember, enableMember } from '@/lib/commands/disable-member'
import { editMember } from '@/lib/commands/edit-member'
import { endOtherSessions, endOwnSession } from '@/lib/commands/end-own-sessions'
import { renewFirstPassword } from '@/lib/commands/renew-first-password'
import { saveOwnUnits } from '@/lib/commands/save-own-units'
import { signIn } from '@/lib/commands/sign-in'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadOwnUnits } from '@/lib/queries/own-units'
import { ownSessions } from '@/lib/queries/own-sessions'
import { loadPeople, loadPerson } from '@/lib/queries/people'
import type { SessionMember } from '@/lib/queries/session-member'
import { sessionMember } from '@/tests/factories/session-member'
import { hashPassword } from '@/lib/server/password'
import { Delivery, Foundry, FoundryEvent, Member, Notice, PushSubscription, Session, SignInWait, TreeWatch } from '@/models'
import { buildFoundry, buildRecipe, buildTree, type TestFoundry } from '@/tests/factories/shell-room'
import { seedMember, type SeededMember } from '@/tests/setup/server'

const DAY = 24 * 3_600_000
const START = Date.UTC(2026, 10, 30, 6)
const NEW = 'heron on the weir at six'
let now = START
const clock = { now: () => now }
let count = 0
let owner: SeededMember
let foundry: TestFoundry

const by = (member: Actor = owner) => ({ member, clock })
const attempt = (email: string, password: string) => signIn({ email, password, userAgent: 'test', device: null }, { clock })

async function enter({ email, password }: Pick<SeededMember, 'email' | 'password'>): Promise<SessionMember> {
  const result = await attempt(email, password)
  if (result.outcome !== 'signed in') throw new Error(result.outcome)
  const member = await sessionMember(result.sessionId, { clock })
  if (!member) throw new Error('no session')
  return member
}
const isIn = async ({ sessionId }: SessionMember) => (await sessionMember(sessionId, { clock })) !== null
const person = (role: SeededMember['role'], name = `Person ${(count += 1)}`) =>
  seedMember(role, { name, email: `person${(count += 1)}@kilnward.example` })
const eventsOf = async (subjectId: string) =>
  (await FoundryEvent.findAll({ where: { subjectType: 'member', subjectId }, order: [['id', 'ASC']] })).map(({ kind }) => kind)

beforeAll(async () => {
  foundry = await buildFoundry()
})

beforeEach(async () => {
  now = START
  await SignInWait.destroy({ where: {} })
  // Whoever was an owner before is none any more: each test has exactly the owners it makes.
  await Member.update({ role: 'crew' }, { where: { role: 'owner' } })
  owner = await person('owner', 'Olga Owner')
})

describe('adding a member', () => {
  it('makes a first password, good for a day, and says nothing of it in the history', async () => {
    const { memberId, firstPassword } = await addMember({ name: 'Nell Ware', email: ' Nell@Foundry.example ', role: 'operator' }, by())
    expect(firstPassword).toMatch(/^[a-z2-9]{4}(?:-[a-z2-9]{4}){3}$/)
    expect(await loadPerson(memberId)).toMatchObject({
      name: 'Nell Ware',
      email: 'nell@foundry.example',
      firstPasswordUntil: START + DAY,
      lastSignedInAt: null,
    })
    const [event] = await FoundryEvent.findAll({ where: { subjectId: memberId } })
    expect(event).toMatchObject({ kind: 'member added', subjectName: 'Nell Ware', memberId: owner.id })
    expect(JSON.stringify(event)).not.toContain(firstPassword)
    expect((await enter({ email: 'nell@foundry.example', password: firstPassword })).mustChangePassword).toBe(true)
    expect((await loadPerson(memberId))?.lastSignedInAt).toBe(START)
  })

  it('makes another password each time', async () => {
    const made = await Promise.all([1, 2, 3].map((n) => addMember({ name: `N${n}`, email: `n${n}@foundry.example`, role: 'crew' }, by())))
    expect(new Set(made.map(({ firstPassword }) => firstPassword)).size).toBe(3)
  })

  it('refuses an e-mail that somebody has, in any case, or had', async () => {
    const known = await person('crew')
    const again = { name: 'Other', email: known.email.toUpperCase(), role: 'crew' as const }
    await expect(addMember(again, by())).rejects.toMatchObject({ code: 'conflict', extra: { fields: [{ path: 'email' }] } })
    await disableMember(known.id, by())
    await expect(addMember(again, by())).rejects.toThrow(/is disabled: enable them instead/)
    expect(await Member.count({ where: { email: known.email } })).toBe(1)
  })
})

describe('a first password', () => {
  it('opens until it runs out, to the millisecond, and nothing stays open behind it', async () => {
    const { firstPassword } = await addMember({ name: 'Late', email: 'late@foundry.example', role: 'operator' }, by())
    now = START + DAY - 1
    const session = await enter({ email: 'late@foundry.example', password: firstPassword })
    now = START + DAY
    expect(await isIn(session)).toBe(false)
    expect(await attempt('late@foundry.example', firstPassword)).toEqual({ outcome: 'first password over' })
    expect(await attempt('late@foundry.example', 'guessed')).toEqual({ outcome: 'refused' })
  })

  it('is over once the member has made their own', async () => {
    const { memberId, firstPassword } = await addMember({ name: 'Nora', email: 'nora@foundry.example', role: 'operator' }, by())
    const asking = await enter({ email: 'nora@foundry.example', password: firstPassword })
    const elsewhere = await enter({ email: 'nora@foundry.example', password: firstPassword })
    const { sessionId } = await changePassword({ currentPassword: firstPassword, newPassword: NEW }, { member: asking, clock })
    expect(await sessionMember(sessionId, { clock })).toMatchObject({ id: memberId, mustChangePassword: false })
    expect([await isIn(asking), await isIn(elsewhere)]).toEqual([false, false])
    now = START + 2 * DAY
    expect(await attempt('nora@foundry.example', NEW)).toMatchObject({ outcome: 'signed in' })
    expect(await attempt('nora@foundry.example', firstPassword)).toEqual({ outcome: 'refused' })
    expect(await eventsOf(memberId)).toEqual(['member added', 'password changed'])
  })

  it('is made anew for a member who forgot theirs: sessions and waits end', async () => {
    const member = await person('operator')
    const session = await enter(member)
    for (let index = 0; index < 5; index += 1) await attempt(member.email, 'wrong')
    expect(await attempt(member.email, member.password)).toMatchObject({ outcome: 'wait' })
    const { firstPassword } = await renewFirstPassword(member.id, by())
    expect(await isIn(session)).toBe(false)
    expect(await attempt(member.email, member.password)).toEqual({ outcome: 'refused' })
    expect((await enter({ email: member.email, password: firstPassword })).mustChangePassword).toBe(true)
  })

  it('is not made for oneself, nor for a disabled member', async () => {
    const member = await person('operator')
    await expect(renewFirstPassword(owner.id, by())).rejects.toMatchObject({ code: 'conflict' })
    await disableMember(member.id, by())
    await expect(renewFirstPassword(member.id, by())).rejects.toMatchObject({ code: 'conflict' })
    await expect(renewFirstPassword(newId(), by())).rejects.toMatchObject({ code: 'not_found' })
  })
})

describe('the way back in', () => {
  const isOwn = async (id: string) => (await Member.findByPk(id))?.firstPasswordUntil === null

  it('is made by one owner for another, once more too, but two at once leave one with a password of their own', async () => {
    const other = await person('owner')
    await renewFirstPassword(other.id, by())
    await renewFirstPassword(other.id, by())
    await Member.update({ firstPasswordUntil: null }, { where: { id: other.id } })
    const outcomes = await Promise.allSettled([renewFirstPassword(other.id, by()), renewFirstPassword(owner.id, by(other))])
    expect(outcomes.map(({ status }) => status).toSorted()).toEqual(['fulfilled', 'rejected'])
    expect(await isOwn(owner.id)).not.toBe(await isOwn(other.id))
  })

  it('is made on the machine itself for a sole owner, and the history says so', async () => {
    const { firstPassword } = await renewFirstPassword(owner.id, { member: null, clock })
    expect((await enter({ email: owner.email, password: firstPassword })).mustChangePassword).toBe(true)
    const event = await FoundryEvent.findOne({ where: { subjectId: owner.id, kind: 'first password made' }, rejectOnEmpty: true })
    expect(event.memberId).toBeNull()
    expect(JSON.stringify(event)).toContain('made on the machine itself')
    expect(JSON.stringify(event)).not.toContain(firstPassword)
  })

  it('is closed to the people of a demo laid over the foundry, and open to those of a demo foundry', async () => {
    // The mark is there from the first insert.
    const demo = { id: newId(), name: 'Dora Demo', email: 'dora@kilnward.example', role: 'owner' as const, isDemo: true }
    await Member.create({ ...demo, passwordHash: await hashPassword('nobody knows', 16), disabledAt: START, createdAt: START })
    await expect(enableMember(demo.id, by())).rejects.toThrow(/belongs to the demo data/)
    await expect(renewFirstPassword(demo.id, by())).rejects.toThrow(/belongs to the demo data/)
    expect((await Member.findByPk(demo.id))?.disabledAt).toBe(START)
    await Foundry.update({ isDemo: true }, { where: {} })
    try {
      await enableMember(demo.id, by())
      await renewFirstPassword(demo.id, by())
    } finally {
      await Foundry.update({ isDemo: false }, { where: {} })
    }
    expect((await Member.findByPk(demo.id))?.disabledAt).toBeNull()
  })
})

describe('a change of password', () => {
  it('asks for the present one, and growing waits follow wrong tries', async () => {
    const session = await enter(await person('operator'))
    const change = () => changePassword({ currentPassword: 'not this', newPassword: NEW }, { member: session, clock })
    for (let index = 0; index < 5; index += 1) {
      await expect(change()).rejects.toMatchObject({ code: 'conflict', extra: { fields: [{ path: 'currentPassword' }] } })
    }
    await expect(change()).rejects.toMatchObject({ code: 'too_many_requests', extra: { retryAfterSeconds: 30 } })
    expect(await isIn(session)).toBe(true)
  })

  it('keeps to the rules, and the present one is no new one', async () => {
    const member = await person('operator')
    const session = await enter(member)
    const change = (newPassword: string) => changePassword({ currentPassword: member.password, newPassword }, { member: session, clock })
    for (const wrong of ['too short', 'password1234', member.name.repeat(2), member.email, member.password]) {
      await expect(change(wrong), wrong).rejects.toMatchObject({ code: 'conflict', extra: { fields: [{ path: 'newPassword' }] } })
    }
    expect(await attempt(member.email, member.password)).toMatchObject({ outcome: 'signed in' })
  })

  it('leaves one session, which is new', async () => {
    const member = await person('supervisor')
    const [asking, other] = [await enter(member), await enter(member)]
    const { sessionId } = await changePassword({ currentPassword: member.password, newPassword: NEW }, { member: asking, clock })
    expect([await isIn(asking), await isIn(other)]).toEqual([false, false])
    expect((await ownSessions(member.id, { clock })).map(({ id }) => id)).toEqual([sessionId])
    expect(await eventsOf(member.id)).toEqual(['password changed'])
  })

  it('is done once when two are asked for at the same time', async () => {
    const member = await person('operator')
    const session = await enter(member)
    const change = (newPassword: string) => changePassword({ currentPassword: member.password, newPassword }, { member: session, clock })
    const results = await Promise.allSettled([change(`${NEW} one`), change(`${NEW} two`)])
    expect(results.map(({ status }) => status).toSorted()).toEqual(['fulfilled', 'rejected'])
  })
})

describe('the last owner', () => {
  it('is neither demoted nor disabled', async () => {
    const refusal = { code: 'conflict' }
    const { name, email } = owner
    await expect(editMember(owner.id, { name, email, role: 'crew' }, by())).rejects.toMatchObject(refusal)
    await expect(disableMember(owner.id, by())).rejects.toMatchObject(refusal)
    expect(await loadPerson(owner.id)).toMatchObject({ role: 'owner', disabledAt: null })
    await editMember(owner.id, { name: 'Olga Marsh', email, role: 'owner' }, by())
  })

  it('may go once there is another who can sign in; one with a first password does not count', async () => {
    const { name, email } = owner
    const { memberId } = await addMember({ name: 'Second', email: `second${count}@foundry.example`, role: 'owner' }, by())
    await expect(disableMember(owner.id, by())).rejects.toMatchObject({ code: 'conflict' })
    await Member.update({ firstPasswordUntil: null }, { where: { id: memberId } })
    await editMember(owner.id, { name, email, role: 'supervisor' }, by())
    await expect(disableMember(memberId, by())).rejects.toMatchObject({ code: 'conflict' })
  })

  it('stays when two owners demote or disable each other at once', async () => {
    for (let round = 0; round < 10; round += 1) {
      await Member.update({ role: 'crew' }, { where: { role: 'owner' } })
      const [one, other] = [await person('owner'), await person('owner')]
      const demote = ({ id, name, email }: SeededMember, member: Actor) => editMember(id, { name, email, role: 'operator' }, by(member))
      const both =
        round % 2 === 0 ? [demote(other, one), demote(one, other)] : [disableMember(other.id, by(one)), disableMember(one.id, by(other))]
      const results = await Promise.allSettled(both)
      expect(results.map(({ status }) => status).toSorted()).toEqual(['fulfilled', 'rejected'])
      expect(await Member.count({ where: { role: 'owner', disabledAt: null } })).toBe(1)
    }
  })
})

describe('a member', () => {
  it('with another role is signed out everywhere; with another name is not', async () => {
    const member = await person('supervisor')
    const session = await enter(member)
    await editMember(member.id, { name: 'Sam Weir', email: member.email, role: 'supervisor' }, by())
    expect(await isIn(session)).toBe(true)
    await editMember(member.id, { name: 'Sam Weir', email: member.email, role: 'operator' }, by())
    expect(await isIn(session)).toBe(false)
    const events = await FoundryEvent.findAll({ where: { subjectId: member.id }, order: [['id', 'ASC']] })
    expect(events.map(({ detail }) => [detail['before'], detail['after']])).toEqual([
      [{ name: member.name }, { name: 'Sam Weir' }],
      [{ role: 'supervisor' }, { role: 'operator' }],
    ])
  })

  it('does not take the e-mail of another', async () => {
    const [member, other] = [await person('crew'), await person('crew')]
    const change = editMember(member.id, { name: member.name, email: other.email, role: 'crew' }, by())
    await expect(change).rejects.toMatchObject({ extra: { fields: [{ path: 'email' }] } })
  })

  it('who is saved as they were leaves no line in the history', async () => {
    const { id, name, email, role } = await person('crew')
    await editMember(id, { name, email, role }, by())
    expect(await eventsOf(id)).toEqual([])
  })

  it('who is disabled has no session, no device, no watched tree, and nothing on the way', async () => {
    const tree = await buildTree(foundry, { recipeVersionId: await buildRecipe(foundry) })
    const member = await person('operator')
    const session = await enter(member)
    const subscriptionId = newId()
    const device = { endpoint: 'https://push.example/1', p256dh: 'p', auth: 'a', vapidPublicKey: 'v', scope: 'every tree' } as const
    await PushSubscription.create({ id: subscriptionId, memberId: member.id, ...device, createdAt: now })
    await TreeWatch.create({ treeId: tree.id, memberId: member.id, createdAt: now })
    const notice = {
      kind: 'deviation',
      subjectType: 'coat',
      subjectId: newId(),
      episode: 1,
      title: 't',
      body: 'b',
      urgency: 'high',
    } as const
    const { id: noticeId } = await Notice.create({ id: newId(), ...notice, ttlSeconds: 600, openedAt: now })
    const delivery = { noticeId, memberId: member.id, status: 'waiting', nextAttemptAt: now, expiresAt: now + DAY } as const
    const { id: deliveryId } = await Delivery.create({ id: newId(), subscriptionId, ...delivery })

    await disableMember(member.id, by())
    expect(await isIn(session)).toBe(false)
    expect(await Session.count({ where: { memberId: member.id, endedAt: null } })).toBe(0)
    expect(await PushSubscription.count({ where: { memberId: member.id } })).toBe(0)
    expect(await TreeWatch.count({ where: { memberId: member.id } })).toBe(0)
    expect((await Delivery.findByPk(deliveryId))?.status).toBe('gone')
    expect(await attempt(member.email, member.password)).toEqual({ outcome: 'refused' })

    await enableMember(member.id, by())
    expect(await isIn(session)).toBe(false)
    expect(await attempt(member.email, member.password)).toMatchObject({ outcome: 'signed in' })
    expect(await eventsOf(member.id)).toEqual(['member disabled', 'member enabled'])
  })

  it('is on the list once, the disabled behind the others', async () => {
    const gone = await person('crew', 'Aaron')
    await disableMember(gone.id, by())
    const people = await loadPeople()
    const firstDisabled = people.findIndex(({ disabledAt }) => disabledAt !== null)
    expect(people.slice(firstDisabled).every(({ disabledAt }) => disabledAt !== null)).toBe(true)
    expect(people.filter(({ id }) => id === gone.id)).toHaveLength(1)
  })
})

describe('one’s own sessions', () => {
  it('end one by one, or all but the one that asks; never those of others', async () => {
    const [member, other] = [await person('operator'), await person('operator')]
    const [here, second, third] = [await enter(member), await enter(member), await enter(member)]
    const theirs = await enter(other)
    await endOwnSession(theirs.sessionId, { member: here, clock })
    expect(await isIn(theirs)).toBe(true)
    await endOwnSession(second.sessionId, { member: here, clock })
    expect([await isIn(here), await isIn(second), await isIn(third)]).toEqual([true, false, true])
    await endOtherSessions({ member: here, clock })
    expect([await isIn(here), await isIn(third), await isIn(theirs)]).toEqual([true, false, true])
  })
})

describe('one’s own units', () => {
  it('come with each request, and are the foundry’s until chosen', async () => {
    await Foundry.update({ tempUnit: 'degF', massUnit: 'lb' }, { where: {} })
    const session = await enter(await person('operator'))
    const unitsNow = async () => (await sessionMember(session.sessionId, { clock }))?.units
    expect(await unitsNow()).toEqual({ temp: 'degF', mass: 'lb', length: 'mm' })
    await saveOwnUnits({ tempUnit: 'degC', massUnit: null, lengthUnit: 'inch' }, { member: session, clock })
    expect(await unitsNow()).toEqual({ temp: 'degC', mass: 'lb', length: 'inch' })
    expect(await loadOwnUnits(session.id)).toEqual({ tempUnit: 'degC', massUnit: null, lengthUnit: 'inch' })
    await saveOwnUnits({ tempUnit: 'degC', massUnit: null, lengthUnit: 'inch' }, { member: session, clock })
    expect(await eventsOf(session.id)).toEqual(['own units changed'])
  })
})
