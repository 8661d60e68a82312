import { expect } from 'vitest'
import type { Actor } from '@/lib/members/actor'
import type { PlaceInput } from '@/lib/room/place-input'
import { FoundryEvent } from '@/models'
import { buildAir, buildFoundry, buildMember, HOUR, NOW, type TestFoundry } from '@/tests/factories/shell-room'

/** A foundry with thirty hours of air, and its owner at a laptop. */
export async function openSettings(): Promise<{ foundry: TestFoundry; ines: Actor }> {
  const foundry = await buildFoundry()
  const ines = { ...(await buildMember('owner', 'Ines')), device: 'Firefox on Linux' }
  await buildAir(foundry.sensorId, NOW - 30 * HOUR, NOW)
  return { foundry, ines }
}

/** The lines of one subject, oldest first. */
export async function historyOf(subjectType: string, subjectId?: string) {
  const rows = await FoundryEvent.findAll({ where: { subjectType, ...(subjectId !== undefined && { subjectId }) }, order: [['id', 'ASC']] })
  return rows.map(({ kind, subjectName, memberId, device, at, detail }) => ({ kind, subjectName, memberId, device, at, detail }))
}

export const kindsOf = async (subjectType: string, subjectId?: string) => (await historyOf(subjectType, subjectId)).map(({ kind }) => kind)

/** A refusal that belongs beside one field. */
export const fieldRefusal = (path: string, words: RegExp) => ({
  code: 'conflict',
  extra: { fields: [{ path, message: expect.stringMatching(words) }] },
})

let count = 0
export const placeInputOf = (foundry: TestFoundry, overrides: Partial<PlaceInput> = {}): PlaceInput => ({
  name: `Rail ${(count += 1)}`,
  sensorId: foundry.sensorId,
  airSpeedFansOnMps: 1,
  airSpeedFansOffMps: 1,
  fanDuty: 1,
  airMeasuredOn: null,
  airMeasuredWith: null,
  airMeasuredBy: null,
  fans: [],
  ...overrides,
})
