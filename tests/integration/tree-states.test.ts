import { beforeAll, describe, expect, it } from 'vitest'
import { holdTree, liftHold } from '@/lib/commands/hold-tree'
import { logDips } from '@/lib/commands/log-dips'
import { lookOver } from '@/lib/commands/look-over'
import { moveTree } from '@/lib/commands/move-tree'
import { recordEvidence } from '@/lib/commands/record-evidence'
import { recordReadings } from '@/lib/commands/record-readings'
import { releaseTrees, withdrawRelease } from '@/lib/commands/release-trees'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadFloor } from '@/lib/queries/floor'
import { Coat, Sensor } from '@/models'
import {
  buildAir,
  buildFoundry,
  buildMember,
  buildPlace,
  buildRecipe,
  buildTree,
  dipBody,
  HOUR,
  MINUTE,
  NOW,
  stoppedClock,
  type TestFoundry,
} from '@/tests/factories/shell-room'

let foundry: TestFoundry
let maud: Actor
let ines: Actor

// 21 °C and 50 % in 1.0 m/s air at sea level: one reference hour an hour, so a need of 2.5 takes 2.5 h.
beforeAll(async () => {
  foundry = await buildFoundry()
  maud = await buildMember('operator', 'Maud')
  ines = await buildMember('supervisor', 'Ines')
  await buildAir(foundry.sensorId, NOW - 24 * HOUR, NOW + 80 * HOUR)
})

const at = async (treeId: string, now: number) => {
  const [tree] = (await loadFloor({ now, trees: { ids: [treeId] } })).trees
  return tree!
}
const by = (member: Actor, now: number) => ({ member, clock: stoppedClock(now) })
const dip = (treeId: string, coatNumber: number, dippedAt: number, overrides: Parameters<typeof dipBody>[2] = {}) =>
  logDips(dipBody(foundry, [{ treeId, coatNumber }], { dippedAt, ...overrides }), by(maud, dippedAt))

const touch = (treeId: string, verdict: 'dry' | 'not yet', as: ReturnType<typeof by>) =>
  recordEvidence(treeId, { operationId: newId(), coatNumber: 1, kind: 'touch', spot: 'outside', verdict }, as)

const ONE_BACKUP = [
  { kind: 'backup', stucco: 'medium', need: 4 },
  { kind: 'backup', stucco: 'coarse', need: 4 },
] as const

describe('states of a tree over a drying', () => {
  it('goes from bare wax to overdue', async () => {
    expect((await at((await buildTree(foundry, { intakePassedAt: null })).id, NOW)).state).toBe('bare wax')
    const tree = await buildTree(foundry)
    expect((await at(tree.id, NOW)).state).toBe('wax ready')
    await dip(tree.id, 1, NOW)
    // Need 2.5: MR 0.5 after 0.83 h, likely after 2.5 h, safe (a face coat's guard) after 2.5 x 1.3777 = 3.44 h.
    const states: [hours: number, state: string][] = [
      [0.5, 'wet'],
      [1, 'drying'],
      [2.2, 'nearly dry'],
      [3, 'nearly dry'],
      [3.5, 'dip now'],
      [4, 'waiting'],
      [23.9, 'waiting'],
      [24.1, 'overdue'],
    ]
    for (const [hours, state] of states) expect([hours, (await at(tree.id, NOW + hours * HOUR)).state]).toEqual([hours, state])
    const waiting = await at(tree.id, NOW + 4 * HOUR)
    expect(Math.abs(waiting.stateSince! - (NOW + MINUTE + 2.5 * 1.3777 * HOUR))).toBeLessThan(MINUTE)
    expect((await at(tree.id, NOW + 24.1 * HOUR)).stateSince).toBe(NOW + 24 * HOUR)
  })

  it('lets a backup coat go at its likely time, but waits for the safe one where a recess is', async () => {
    const recipeVersionId = await buildRecipe(foundry, [...ONE_BACKUP, { kind: 'seal', stucco: 'none' }])
    const plain = await buildTree(foundry, { recipeVersionId })
    const deep = await buildTree(foundry, { recipeVersionId, recessClass: 'deep recess' })
    await dip(plain.id, 1, NOW, { stucco: 'medium' })
    await dip(deep.id, 1, NOW, { stucco: 'medium' })
    expect((await at(plain.id, NOW + 4.1 * HOUR)).state).toBe('dip now')
    // 4 x 1.6 = 6.4 likely; sigma 0.269: safe after 6.4 x exp(1.2816 x 0.2693) = 9.04 h.
    expect((await at(deep.id, NOW + 8.9 * HOUR)).mayDip).toBe(false)
    expect((await at(deep.id, NOW + 9.2 * HOUR)).mayDip).toBe(true)
  })

  it('is held whatever the clock says, until the hold is lifted', async () => {
    const tree = await buildTree(foundry)
    await dip(tree.id, 1, NOW)
    await holdTree(tree.id, 'Core shifted', by(maud, NOW))
    expect(await at(tree.id, NOW + 5 * HOUR)).toMatchObject({ state: 'held', mayDip: false, driedOut: null })
    await liftHold(tree.id, 'Pinned', by(ines, NOW))
    expect((await at(tree.id, NOW + 5 * HOUR)).state).toBe('waiting')
  })

  it("takes a person's word: 'dry' lets it be dipped, 'not yet' takes that back", async () => {
    const tree = await buildTree(foundry)
    await dip(tree.id, 1, NOW)
    await touch(tree.id, 'dry', by(maud, NOW + 2 * HOUR))
    expect(await at(tree.id, NOW + 2.1 * HOUR)).toMatchObject({ state: 'dip now', mayDip: true, dippableSince: NOW + 2 * HOUR })
    const seen = await at(tree.id, NOW + 2.1 * HOUR)
    expect(seen.warnings.find((warning) => warning.code === 'said dry')?.text).toMatch(
      /^Maud .* by the clock \d+ % of its water is left\.$/,
    )
    expect((await at(tree.id, NOW + 4 * HOUR)).warnings.map((warning) => warning.code)).not.toContain('said dry')
    await touch(tree.id, 'not yet', by(maud, NOW + 2.2 * HOUR))
    expect((await at(tree.id, NOW + 2.3 * HOUR)).mayDip).toBe(false)
    const dry = await at(tree.id, NOW + 4 * HOUR)
    expect(dry.warnings.map((warning) => warning.code)).toContain('said not yet')
  })

  it('is overdue when its pour date is lost while it waits', async () => {
    const tree = await buildTree(foundry, { pourDate: '2026-10-14' })
    await dip(tree.id, 1, NOW)
    // Three coats to come, and the seal alone needs twelve hours: Wednesday 07:00 cannot be kept.
    expect(await at(tree.id, NOW + 4 * HOUR)).toMatchObject({ state: 'overdue', willMissPour: true })
    expect(await at(tree.id, NOW + HOUR)).toMatchObject({ state: 'drying', willMissPour: true })
  })

  it('misses no pour that lies further off than anybody can look, and surely one that lies nearer', async () => {
    const recipeVersionId = await buildRecipe(foundry, [
      { kind: 'backup', stucco: 'medium', need: 190 },
      { kind: 'backup', stucco: 'medium', need: 190 },
    ])
    const later = await buildTree(foundry, { recipeVersionId, pourDate: '2026-11-20' })
    const sooner = await buildTree(foundry, { recipeVersionId, pourDate: '2026-10-23' })
    for (const tree of [later, sooner]) await dip(tree.id, 1, NOW, { stucco: 'medium' })
    expect(await at(later.id, NOW + HOUR)).toMatchObject({ driedOut: { likelyAt: null }, willMissPour: false })
    expect(await at(sooner.id, NOW + HOUR)).toMatchObject({ driedOut: { likelyAt: null }, willMissPour: true })
  })
})

describe('the end of a shell', () => {
  it('dries out, is looked over, is ready, is released and can come back', async () => {
    const recipeVersionId = await buildRecipe(foundry, [{ kind: 'backup', stucco: 'coarse', need: 4, target: 0.05 }])
    const tree = await buildTree(foundry, { recipeVersionId })
    await expect(lookOver(tree.id, '', by(ines, NOW))).rejects.toMatchObject({ code: 'conflict' })
    await dip(tree.id, 1, NOW, { stucco: 'coarse' })
    expect((await at(tree.id, NOW + 5 * HOUR)).state).toBe('last coat on')
    const release = (now: number) => releaseTrees([tree.id], { confirmations: {} }, by(ines, now))
    await expect(release(NOW + 5 * HOUR)).rejects.toMatchObject({ message: expect.stringContaining('not dried out') })
    // A look at the wet shell is kept, but cracks come while it dries: it does not count.
    await lookOver(tree.id, 'Rim clean', by(ines, NOW + 5 * HOUR))
    expect((await at(tree.id, NOW + 6 * HOUR)).state).toBe('dried out')
    await expect(release(NOW + 6 * HOUR)).rejects.toMatchObject({ message: expect.stringContaining('looked it over') })
    await lookOver(tree.id, 'Rim clean', by(ines, NOW + 6 * HOUR))
    await holdTree(tree.id, 'Kiln is full', by(maud, NOW + 6 * HOUR))
    await expect(release(NOW + 6 * HOUR)).rejects.toMatchObject({ message: expect.stringContaining('Held by Maud: Kiln is full') })
    await liftHold(tree.id, 'Room again', by(ines, NOW + 6 * HOUR))
    expect((await at(tree.id, NOW + 6.1 * HOUR)).state).toBe('ready for burnout')
    await release(NOW + 6.2 * HOUR)
    expect((await at(tree.id, NOW + 6.3 * HOUR)).state).toBe('released')
    expect((await loadFloor({ now: NOW + 7 * HOUR, trees: { on: 'floor' } })).trees.map((each) => each.facts.id)).not.toContain(tree.id)
    await withdrawRelease(tree.id, 'Kiln is down', by(ines, NOW + 7 * HOUR))
    expect((await at(tree.id, NOW + 7.1 * HOUR)).state).toBe('ready for burnout')
  })

  it('asks for a confirmation when the shell hung damp for half a day, and for a new look-over', async () => {
    const damp = await Sensor.create({ name: 'Damp loft', kind: 'logger', createdAt: NOW })
    const place = await buildPlace({ sensorId: damp.id })
    await buildAir(damp.id, NOW - HOUR, NOW + 7 * HOUR)
    await buildAir(damp.id, NOW + 7 * HOUR + 5 * MINUTE, NOW + 40 * HOUR, { airTempC: 17, relHumidityPct: 85 })
    const recipeVersionId = await buildRecipe(foundry, [{ kind: 'backup', stucco: 'coarse', need: 4, target: 0.05 }])
    const tree = await buildTree(foundry, { recipeVersionId, placeId: place.id })
    await logDips(
      dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: place.id }], { dippedAt: NOW, stucco: 'coarse' }),
      by(maud, NOW),
    )
    await lookOver(tree.id, '', by(ines, NOW + 6 * HOUR))
    expect((await at(tree.id, NOW + 8 * HOUR)).state).toBe('ready for burnout')
    expect((await at(tree.id, NOW + 21 * HOUR)).state).toBe('dried out')
    await expect(releaseTrees([tree.id], { confirmations: {} }, by(ines, NOW + 21 * HOUR))).rejects.toMatchObject({ code: 'conflict' })
    await releaseTrees([tree.id], { confirmations: { [tree.id]: 'weight' } }, by(ines, NOW + 21 * HOUR))
    expect((await at(tree.id, NOW + 22 * HOUR)).state).toBe('released')
  })
})

describe('a shell that was moved', () => {
  it('hangs where it was carried last, though the dip came from a tablet whose clock runs ahead', async () => {
    const tree = await buildTree(foundry)
    const [rack, corner] = [await buildPlace({ sensorId: foundry.sensorId }), await buildPlace({ sensorId: foundry.sensorId })]
    await logDips(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: rack.id }], { dippedAt: NOW + 1.5 * MINUTE }), by(maud, NOW))
    await moveTree(tree.id, corner.id, by(maud, NOW + MINUTE))
    expect((await at(tree.id, NOW + HOUR)).facts.stays.at(-1)?.placeId).toBe(corner.id)
  })

  it('stays damp in store when it is carried into a dry room', async () => {
    const damp = await Sensor.create({ name: 'Damp cellar', kind: 'logger', createdAt: NOW })
    const cellar = await buildPlace({ sensorId: damp.id })
    await buildAir(damp.id, NOW - HOUR, NOW + 7 * HOUR)
    await buildAir(damp.id, NOW + 7 * HOUR + 5 * MINUTE, NOW + 24 * HOUR, { airTempC: 17, relHumidityPct: 85 })
    const recipeVersionId = await buildRecipe(foundry, [{ kind: 'backup', stucco: 'coarse', need: 4, target: 0.05 }])
    const tree = await buildTree(foundry, { recipeVersionId, placeId: cellar.id })
    await logDips(
      dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: cellar.id }], { dippedAt: NOW, stucco: 'coarse' }),
      by(maud, NOW),
    )
    await lookOver(tree.id, '', by(ines, NOW + 6.5 * HOUR))
    await moveTree(tree.id, foundry.placeId, by(maud, NOW + 20.5 * HOUR))
    const moved = await at(tree.id, NOW + 21 * HOUR)
    expect(moved.state).toBe('dried out')
    expect(moved.warnings.map((warning) => warning.code)).toContain('damp in store')
    await releaseTrees([tree.id], { confirmations: { [tree.id]: 'weight' } }, by(ines, NOW + 21 * HOUR))
    // The coat log keeps the cellar's air, not that of the room where it hung for its last half hour.
    const coat = await Coat.findOne({ where: { treeId: tree.id }, rejectOnEmpty: true })
    expect(coat.worstRelHumidityPct).toBe(85)
    expect(coat.meanRelHumidityPct).toBeGreaterThan(70)
  })
})

describe('what the air does not tell', () => {
  it('is unknown without readings, and never dry', async () => {
    const silent = await Sensor.create({ name: 'Silent', kind: 'logger', createdAt: NOW })
    const place = await buildPlace({ sensorId: silent.id })
    const tree = await buildTree(foundry, { placeId: place.id })
    await logDips(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: place.id }]), by(maud, NOW))
    const unknown = await at(tree.id, NOW + 30 * HOUR)
    expect(unknown).toMatchObject({ state: 'unknown', mayDip: false })
    expect(unknown.warnings.map((warning) => warning.code)).toContain('unknown')
    // The warning asks for a touch: after it the tree is dipped like any other.
    await touch(tree.id, 'dry', by(maud, NOW + 30 * HOUR))
    const felt = await at(tree.id, NOW + 30 * HOUR)
    expect(felt).toMatchObject({ mayDip: true, dippableSince: NOW + 30 * HOUR })
    expect(felt.warnings.map((warning) => warning.code)).not.toContain('unknown')
    const backup = { bathId: foundry.backupBathId, stucco: 'medium', dippedAt: NOW + 30 * HOUR } as const
    const { response } = await logDips(
      dipBody(foundry, [{ treeId: tree.id, coatNumber: 2, placeId: place.id }], backup),
      by(maud, NOW + 30 * HOUR),
    )
    expect(response).toMatchObject({ coats: [{ deviations: [] }] })
  })

  it('takes a dry call back when late readings show damp air', async () => {
    const late = await Sensor.create({ name: 'Late', kind: 'logger', createdAt: NOW })
    const place = await buildPlace({ sensorId: late.id })
    await buildAir(late.id, NOW - HOUR, NOW)
    const tree = await buildTree(foundry, { placeId: place.id })
    await logDips(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: place.id }]), by(maud, NOW))
    await buildAir(late.id, NOW + 6 * HOUR, NOW + 6 * HOUR + 10 * MINUTE)
    expect((await at(tree.id, NOW + 6 * HOUR + 10 * MINUTE)).mayDip).toBe(false)
    await buildAir(late.id, NOW + 12 * HOUR, NOW + 12 * HOUR + 10 * MINUTE)
    expect((await at(tree.id, NOW + 12 * HOUR + 10 * MINUTE)).mayDip).toBe(true)
    const rows = Array.from({ length: 140 }, (_, index) => ({
      measuredAt: NOW + (index + 1) * 5 * MINUTE,
      airTempC: 16,
      relHumidityPct: 97,
    }))
    await recordReadings({ sensorId: late.id, source: 'sensor', enteredBy: null, rows }, { clock: stoppedClock(NOW + 12.2 * HOUR) })
    expect((await at(tree.id, NOW + 12 * HOUR + 10 * MINUTE)).mayDip).toBe(false)
  })

  it('stops at likely with one typed reading; a second one makes it safe', async () => {
    const wall = await Sensor.create({ name: 'Wall hygrometer', kind: 'wall hygrometer', createdAt: NOW })
    const place = await buildPlace({ sensorId: wall.id })
    const tree = await buildTree(foundry, { placeId: place.id })
    const room = { airTempC: 21, relHumidityPct: 50 }
    await logDips(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: place.id }], { room }), by(maud, NOW))
    const once = await at(tree.id, NOW + 8 * HOUR)
    expect(once).toMatchObject({ mayDip: false })
    expect(once.warnings.map((warning) => warning.code)).toContain('confirm first')
    await recordReadings(
      { sensorId: wall.id, source: 'typed', enteredBy: maud.id, rows: [{ measuredAt: NOW + 8 * HOUR, ...room }] },
      { clock: stoppedClock(NOW + 8 * HOUR) },
    )
    expect(await at(tree.id, NOW + 8.1 * HOUR)).toMatchObject({ mayDip: true, state: 'waiting' })
  })

  it('counts a reading typed after the dip once, however often it is read from the records', async () => {
    const wall = await Sensor.create({ name: 'Wall of the annexe', kind: 'wall hygrometer', createdAt: NOW })
    const place = await buildPlace({ sensorId: wall.id })
    const tree = await buildTree(foundry, { placeId: place.id })
    await logDips(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: place.id }]), by(maud, NOW))
    await recordReadings(
      {
        sensorId: wall.id,
        source: 'typed',
        enteredBy: maud.id,
        rows: [{ measuredAt: NOW + 10 * MINUTE, airTempC: 21, relHumidityPct: 50 }],
      },
      { clock: stoppedClock(NOW + 10 * MINUTE) },
    )
    const lone = await at(tree.id, NOW + 8 * HOUR)
    expect(lone).toMatchObject({ mayDip: false, call: { isLikelyDry: true, isSafeDry: false, needsConfirmation: true } })
    expect(lone.warnings.map((warning) => warning.code)).toContain('confirm first')
  })

  it('splits the dose where a tree was moved', async () => {
    const corner = await buildPlace({ sensorId: foundry.sensorId, airSpeedMps: 0.1 })
    const tree = await buildTree(foundry)
    await dip(tree.id, 1, NOW)
    await moveTree(tree.id, corner.id, by(maud, NOW + HOUR))
    // phi(0.1 m/s) = 0.5214; the clock starts after a minute's drain.
    const expected = 59 / 60 + 0.5214
    expect(Math.abs((await at(tree.id, NOW + 2 * HOUR)).call!.dose.likely - expected)).toBeLessThan(0.002)
  })
})
