import { QueryTypes } from 'sequelize'
import { beforeAll, describe, expect, it } from 'vitest'
import { createTree } from '@/lib/commands/save-tree'
import { issueSensorToken } from '@/lib/commands/issue-sensor-token'
import { logDips } from '@/lib/commands/log-dips'
import { signIn } from '@/lib/commands/sign-in'
import { newId } from '@/lib/core/ids'
import { layDemo, type LaidDemo } from '@/lib/demo/lay-demo'
import { DEMO_SIGN_INS } from '@/lib/demo/people'
import { removeDemo } from '@/lib/demo/remove-demo'
import { readDemoTokens, type DemoTokens } from '@/lib/demo/token-file'
import type { Actor } from '@/lib/members/actor'
import { loadDemoFeed } from '@/lib/queries/demo-feed'
import { loadDemoSignIns } from '@/lib/queries/demo-sign-ins'
import { loadQueue } from '@/lib/queries/queue'
import { loadTreeForm } from '@/lib/queries/tree-form'
import { sensorOfToken } from '@/lib/queries/sensor-of-token'
import { Bath, database, Foundry, Member, Place, Recipe, RecipeVersion, Sensor, Tree, Work } from '@/models'
import { buildAir, buildFoundry, buildMember, buildRecipe, buildTree, HOUR, NOW, stoppedClock } from '@/tests/factories/shell-room'

const select = <Row extends object>(sql: string) => database.query<Row>(sql, { type: QueryTypes.SELECT })

/** Lines of history are only added to, and SQLite counts its own numbers up. */
const GROWS = ['foundry_events', 'sqlite_sequence']

/** Every row of every table, as it stands. */
async function everything(): Promise<Record<string, object[]>> {
  const tables = await select<{ name: string }>(`SELECT name FROM sqlite_schema WHERE type = 'table' ORDER BY name`)
  const all: Record<string, object[]> = {}
  for (const { name } of tables) {
    if (GROWS.includes(name)) continue
    all[name] = (await select<object>(`SELECT * FROM "${name}"`)).toSorted((a, b) => (JSON.stringify(a) < JSON.stringify(b) ? -1 : 1))
  }
  return all
}

const clock = stoppedClock()
let owner: Actor
let foundry: Awaited<ReturnType<typeof buildFoundry>>
const by = () => ({ member: owner, clock })

beforeAll(async () => {
  foundry = await buildFoundry({ timeZone: 'America/Denver' })
  await Foundry.update({ altitudeM: 1600 }, { where: { id: 1 } })
  owner = await buildMember('owner', 'Real Owner')
  await buildRecipe(foundry)
  await buildAir(foundry.sensorId, NOW - 6 * HOUR, NOW)
  await issueSensorToken({ sensorId: foundry.sensorId }, by())
})

// In this order: laying takes seconds, so that what is laid serves several tests.
describe('the demo over a foundry of one’s own', () => {
  let before: Record<string, object[]>
  let laid: LaidDemo
  let tokens: DemoTokens
  beforeAll(async () => {
    before = await everything()
    laid = await layDemo(by())
    tokens = (await readDemoTokens()) ?? []
  }, 240_000)

  it('has trees in every state, in the zone of the foundry, all of them marked', async () => {
    const { queue } = await loadQueue({ clock })
    expect(queue.trees).toHaveLength(32)
    expect(new Set(queue.trees.map(({ state }) => state)).size).toBeGreaterThanOrEqual(12)
    expect(queue.foundry).toMatchObject({ timeZone: 'America/Denver', isDemo: false, hasDemoData: true })
    expect(queue.trees.every(({ isDemo }) => isDemo)).toBe(true)
    expect(await Tree.count({ where: { isDemo: false } })).toBe(0)
  })

  it('is put beside what has its name, and says what it renamed', () => {
    expect(laid).toMatchObject({
      isInOwnHours: true,
      renamed: [
        { name: 'Face slurry', into: 'Face slurry (demo)' },
        { name: 'Backup slurry', into: 'Backup slurry (demo)' },
      ],
    })
  })

  it('opens no door: its people are disabled, and their public passwords are not theirs here', async () => {
    expect(await loadDemoSignIns()).toEqual([])
    const tryAll = async () => {
      for (const { email, password } of DEMO_SIGN_INS) {
        expect(await signIn({ email, password, userAgent: '', device: null }, { clock })).toEqual({ outcome: 'refused' })
      }
    }
    await tryAll()
    await Member.update({ disabledAt: null }, { where: { isDemo: true } })
    await tryAll()
  })

  it('is fed by its own loggers alone', async () => {
    expect(tokens).toHaveLength(2)
    expect((await loadDemoFeed())?.loggers.map(({ sensorId }) => sensorId)).toEqual(tokens.map(({ sensorId }) => sensorId))
  })

  it('is not laid twice', async () => {
    await expect(layDemo(by())).rejects.toMatchObject({ code: 'conflict', message: 'The demo data is here already.' })
  })

  it('is taken away without a trace, tokens and all', async () => {
    clock.advance(HOUR)
    expect(await removeDemo(by())).toEqual({ treeCount: laid.treeCount, kept: [], isEmptied: false })
    expect(await everything()).toEqual(before)
    const lines = await select<{ kind: string }>(`SELECT kind FROM foundry_events WHERE kind LIKE 'demo%' ORDER BY id`)
    expect(lines.map(({ kind }) => kind)).toEqual(['demo data laid', 'demo data removed'])
    expect(await loadDemoFeed()).toBeNull()
    expect(await readDemoTokens()).toBeNull()
    for (const { token } of tokens) expect(await sensorOfToken(token)).toBeNull()
    await expect(removeDemo(by())).rejects.toMatchObject({ code: 'conflict', message: 'There is no demo data here.' })
  })
})

describe('what real trees stand on', () => {
  it('stays, without its mark, and is named', async () => {
    await layDemo(by())
    const recipe = await Recipe.findOne({ where: { name: 'Six coats, small work' }, rejectOnEmpty: true })
    const version = await RecipeVersion.findOne({ where: { recipeId: recipe.id }, rejectOnEmpty: true })
    const shed = await Place.findOne({ where: { name: 'Boat shed' }, rejectOnEmpty: true })
    const { treeId } = await createTree(
      {
        tag: 'T-900',
        recipeVersionId: version.id,
        placeId: shed.id,
        pieces: [{ workTitle: 'Gull on a Post', sectionName: '', editionNumber: 5, isRecast: true }],
        waxMassKg: 1,
        cupKind: 'wax',
        cupVolumeL: 0.3,
        recessClass: 'none',
        spacing: 'open',
        hungMassKg: null,
        pourDate: null,
      },
      by(),
    )
    // One run over a real tree and a demo tree.
    const [demoTree] = (await loadQueue({ clock })).queue.trees.filter(({ state }) => state === 'wax ready')
    const [first] = await select<{ bathId: string }>(
      `SELECT bath_id AS bathId FROM recipe_coats WHERE recipe_version_id = '${version.id}' AND number = 1`,
    )
    await logDips(
      {
        operationId: newId(),
        bathId: first?.bathId ?? '',
        stucco: 'fine',
        way: 'dip',
        drainSeconds: 75,
        dippedAt: clock.now(),
        room: { airTempC: 18, relHumidityPct: 60 },
        trees: [
          { treeId, coatNumber: 1, placeId: shed.id },
          { treeId: demoTree?.id ?? '', coatNumber: 1, placeId: shed.id },
        ],
      },
      by(),
    )
    const real = async () => [
      await select(`SELECT * FROM trees WHERE id = '${treeId}'`),
      await select(`SELECT * FROM coats WHERE tree_id = '${treeId}'`),
      await select(`SELECT * FROM tree_events WHERE tree_id = '${treeId}'`),
      await select(`SELECT * FROM tree_places WHERE tree_id = '${treeId}'`),
      await select(`SELECT o.* FROM operations o JOIN coats c USING (operation_id) WHERE c.tree_id = '${treeId}'`),
    ]
    const before = await real()

    // Somebody let one of the demo's people in, who then took a real tree in.
    const maud = await Member.findOne({ where: { name: 'Maud Penhale' }, rejectOnEmpty: true })
    await maud.update({ disabledAt: null })
    await (await buildTree(foundry)).update({ intakePassedBy: maud.id })

    const { kept, treeCount } = await removeDemo(by())
    expect(await real()).toEqual(before)
    expect(treeCount).toBeGreaterThan(32)
    expect(kept).toEqual([
      { kind: 'recipe', name: 'Six coats, small work' },
      { kind: 'bath', name: 'Face slurry (demo)' },
      { kind: 'bath', name: 'Backup slurry (demo)' },
      { kind: 'place', name: 'Boat shed' },
      { kind: 'sensor', name: 'Boat shed hygrometer' },
      { kind: 'work', name: 'Gull on a Post' },
      { kind: 'member', name: 'Maud Penhale' },
    ])
    expect((await maud.reload()).disabledAt).toBe(clock.now())
    expect(await Tree.count()).toBe(2)
    for (const rows of [
      await Recipe.findAll(),
      await Bath.findAll(),
      await Place.findAll(),
      await Sensor.findAll(),
      await Work.findAll(),
      await Member.findAll(),
    ]) {
      expect(rows.filter(({ isDemo }) => isDemo)).toEqual([])
    }
    // The recast's whole line of castings stays: that of the scrapped shell, and the first.
    const pieces = await select<{ n: number }>('SELECT count(*) AS n FROM pieces WHERE recast_of IS NOT NULL')
    expect(pieces[0]?.n).toBe(2)
    expect((await loadQueue({ clock })).queue.trees.filter(({ isDemo }) => isDemo)).toEqual([])
    expect((await loadTreeForm()).recipes.map(({ label }) => label)).toContain('Six coats, small work, version 1')
    expect(await select('SELECT * FROM pragma_foreign_key_check')).toEqual([])
    const [line] = await select<{ text: string }>(
      `SELECT detail ->> 'text' AS text FROM foundry_events WHERE kind = 'demo data removed' ORDER BY id DESC`,
    )
    expect(line?.text).toContain('recipe Six coats, small work')
  }, 240_000)

  it('is a reason not to lay the demo again', async () => {
    await expect(layDemo(by())).rejects.toMatchObject({ code: 'conflict' })
  })
})
