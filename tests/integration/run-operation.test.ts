import { beforeAll, describe, expect, it } from 'vitest'
import { runOperation, type OperationAnswer } from '@/lib/commands/run-operation'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import { BathStir, Bath, Operation } from '@/models'
import { seedMember, type SeededMember } from '@/tests/setup/server'

const clock = { now: () => Date.UTC(2026, 10, 30, 6) }
let member: SeededMember
let other: SeededMember
const bathId = newId()

beforeAll(async () => {
  member = await seedMember('operator')
  other = await seedMember('supervisor')
  await Bath.create({ id: bathId, name: 'Face', kind: 'face', createdAt: clock.now() })
})

const stir = async (): Promise<OperationAnswer> => {
  const row = await BathStir.create({ id: newId(), bathId, stirredAt: clock.now(), memberId: member.id })
  return { status: 201, response: { stirId: row.id } }
}
const input = (operationId: string, body: unknown = { bathId, note: null }) => ({
  operationId,
  kind: 'stir',
  memberId: member.id,
  body,
  clock,
})
const countStirs = () => BathStir.count()

describe('runOperation', () => {
  it('does the work once and answers a repeat from the record', async () => {
    const id = newId()
    const before = await countStirs()
    const first = await runOperation(input(id), stir)
    const second = await runOperation(input(id), stir)
    expect(first).toMatchObject({ status: 201, replayed: false })
    expect(second).toEqual({ ...first, replayed: true })
    expect(await countStirs()).toBe(before + 1)
  })

  it('knows a body by what it says, not by the order of its keys', async () => {
    const id = newId()
    await runOperation(input(id, { a: 1, b: { c: [1, 2], d: null } }), stir)
    expect(await runOperation(input(id, { b: { d: null, c: [1, 2] }, a: 1 }), stir)).toMatchObject({ replayed: true })
  })

  it.each([
    ['body', { body: { bathId, note: 'other' } }],
    ['list order', { body: { bathId, note: [2, 1] } }],
    ['kind', { kind: 'dip' }],
  ])('refuses the same id with another %s', async (_name, change) => {
    const id = newId()
    await runOperation(input(id, { bathId, note: [1, 2] }), stir)
    const before = await countStirs()
    const again = runOperation({ ...input(id, { bathId, note: [1, 2] }), ...change }, stir)
    await expect(again).rejects.toMatchObject({ code: 'unprocessable' })
    expect(await countStirs()).toBe(before)
  })

  it("refuses another member's id", async () => {
    const id = newId()
    await runOperation(input(id), stir)
    await expect(runOperation({ ...input(id), memberId: other.id }, stir)).rejects.toMatchObject({ code: 'unprocessable' })
  })

  it('does it once when two copies arrive together', async () => {
    const id = newId()
    const before = await countStirs()
    const answers = await Promise.all([runOperation(input(id), stir), runOperation(input(id), stir), runOperation(input(id), stir)])
    expect(answers.filter(({ replayed }) => replayed)).toHaveLength(2)
    expect(new Set(answers.map(({ response }) => response['stirId'])).size).toBe(1)
    expect(await countStirs()).toBe(before + 1)
  })

  it('keeps nothing of a refused write, so that it may be sent again', async () => {
    const id = newId()
    const before = await countStirs()
    const refused = runOperation(input(id), async () => {
      await stir()
      throw new AppError('conflict', 'Already on.')
    })
    await expect(refused).rejects.toMatchObject({ code: 'conflict' })
    expect(await countStirs()).toBe(before)
    expect(await Operation.findByPk(id)).toBeNull()
    expect(await runOperation(input(id), stir)).toMatchObject({ replayed: false })
  })
})
