import { DataTypes, QueryTypes } from 'sequelize'
import { beforeAll, describe, expect, it, vi } from 'vitest'
import { newId } from '@/lib/core/ids'

// After the setup file has named the data directory.
const models = await import('@/models/index')
const { database, inTransaction } = models

const NOW = 1_790_000_000_123

const rows = <Row extends object>(sql: string): Promise<Row[]> => database.query<Row>(sql, { type: QueryTypes.SELECT })

/** One pragma of the handle that a query of this moment gets. */
async function pragma(name: string): Promise<unknown> {
  const [row] = await rows<Record<string, unknown>>(`SELECT * FROM pragma_${name}`)
  return Object.values(row ?? {})[0]
}

const memberId = newId()
const bathId = newId()
const placeId = newId()
const recipeVersionId = newId()
const treeId = newId()
const operationId = newId()
const coatId = newId()

const work = (title: string) => models.Work.create({ id: newId(), title, createdAt: NOW })
const titles = async () => (await models.Work.findAll({ order: ['title'] })).map((one) => one.title)

const orphan = () => models.Hold.create({ id: newId(), treeId: newId(), reason: 'crack', heldBy: memberId, heldAt: NOW })
const settings = async () => [await pragma('busy_timeout'), await pragma('synchronous'), await pragma('foreign_keys')]
const pause = () => new Promise((resolve) => setTimeout(resolve, 20))

/** Sequelize takes the RAISE of a trigger for a unique constraint ('Validation error'); the trigger's words are in its parent. */
const raised = (words: string): object => ({ parent: { message: `SQLITE_CONSTRAINT: ${words}` } })

beforeAll(async () => {
  const stamp = { createdAt: NOW }
  await models.Foundry.create({ id: 1, name: 'Foundry', timeZone: 'Europe/Lisbon', altitudeM: 12.5, isDemo: true, ...stamp })
  await models.Member.create({ id: memberId, name: 'Ana', email: 'ana@example.com', role: 'operator', passwordHash: 'scrypt$x', ...stamp })
  const sensor = await models.Sensor.create({ name: 'North wall', kind: 'logger', ...stamp })
  await models.Place.create({
    id: placeId,
    name: 'Rack 1',
    airSpeedFansOnMps: 2,
    airSpeedFansOffMps: 0.2,
    sensorId: sensor.id,
    ...stamp,
  })
  await models.Bath.create({ id: bathId, name: 'Face', kind: 'face', ...stamp })
  const recipe = await models.Recipe.create({ id: newId(), name: 'Standard', ...stamp })
  await models.RecipeVersion.create({ id: recipeVersionId, recipeId: recipe.id, version: 1, ...stamp })
  await models.RecipeCoat.create({
    recipeVersionId,
    number: 1,
    kind: 'face',
    bathId,
    stucco: 'fine',
    needReferenceHours: 4,
    moistureTarget: 0.1,
    guard: 'safe',
    drainSeconds: 60,
    longestWaitHours: 48,
    isPrewet: false,
    readAloud: '',
  })
  await models.Tree.create({
    id: treeId,
    tag: 'K-1',
    recipeVersionId,
    waxMassKg: 3.5,
    cupKind: 'wax',
    cupVolumeL: 1,
    recessClass: 'none',
    spacing: 'open',
    updatedAt: NOW,
    ...stamp,
  })
  await models.Operation.create({
    operationId,
    kind: 'dips',
    memberId,
    bodyHash: 'a'.repeat(64),
    status: 201,
    response: { coats: [{ number: 1 }] },
    ...stamp,
  })
  await models.Coat.create({
    id: coatId,
    treeId,
    number: 1,
    operationId,
    kind: 'face',
    bathId,
    stucco: 'fine',
    way: 'dip',
    drainSeconds: 60,
    dippedAt: NOW,
    placeId,
    loggedBy: memberId,
    loggedAt: NOW,
    deviations: ['still wet', "the crew's word"],
    needReferenceHours: 4,
    moistureRatioBelow: 0,
  })
  await models.TreeEvent.create({ treeId, kind: 'dipped', memberId, at: NOW, detail: { coat: 1 } })
})

describe('models and the schema', async () => {
  type Column = { name: string; type: string; notnull: number; pk: number; dflt_value: string | null }
  const { migrate } = await import('@/db/migrator')
  const { databaseFile } = await import('@/db/connection')
  await migrate(databaseFile())
  const tables = await rows<{ name: string }>(
    "SELECT name FROM sqlite_master WHERE type = 'table' AND name NOT LIKE 'sqlite_%' AND name <> 'migrations' ORDER BY name",
  )
  const byTable = new Map(Object.values(database.models).map((model) => [model.getTableName(), model]))

  it('are one model to one table', () => {
    expect([...byTable.keys()].map(String).toSorted()).toEqual(tables.map((table) => table.name))
    expect(tables.length).toBeGreaterThan(30)
  })

  it.each(tables)('agree on the columns of $name', async ({ name }) => {
    // By name: a column that came later stands last in its table, and in the model where it belongs.
    const columns = await rows<Column>(`SELECT * FROM pragma_table_info('${name}') ORDER BY name`)
    const attributes = Object.values(byTable.get(name)!.getAttributes()).toSorted((one, other) =>
      (one.field ?? '') < (other.field ?? '') ? -1 : 1,
    )
    expect(
      attributes.map((attribute) => ({
        name: attribute.field,
        isRequired: attribute.allowNull === false || attribute.autoIncrement === true,
        isKey: attribute.primaryKey === true,
        hasDefault: attribute.defaultValue !== undefined,
      })),
    ).toEqual(
      columns.map((column) => ({
        name: column.name,
        // An INTEGER PRIMARY KEY is the row id: never null, though SQLite does not say so.
        isRequired: column.notnull === 1 || column.pk > 0,
        isKey: column.pk > 0,
        hasDefault: column.dflt_value !== null,
      })),
    )
    const stored = attributes.map((attribute) => {
      if (attribute.type instanceof DataTypes.DOUBLE) return 'REAL'
      return attribute.type instanceof DataTypes.INTEGER || attribute.type instanceof DataTypes.BOOLEAN ? 'INTEGER' : 'TEXT'
    })
    expect(stored).toEqual(columns.map((column) => column.type))
  })
})

describe('values', () => {
  it('brings an instant back as the same number, and compares it as one', async () => {
    const coat = await models.Coat.findByPk(coatId, { rejectOnEmpty: true })
    expect(coat.dippedAt).toBe(NOW)
    expect(coat.coveredAt).toBeNull()
    expect(await rows('SELECT typeof(dipped_at) AS type FROM coats WHERE dipped_at = 1790000000123')).toEqual([{ type: 'integer' }])
    expect(await models.Coat.count({ where: { dippedAt: NOW } })).toBe(1)
    expect(await models.Coat.count({ where: { dippedAt: NOW + 1 } })).toBe(0)
    const raw = await models.Coat.findOne({ where: { id: coatId }, raw: true, rejectOnEmpty: true })
    expect(raw.dippedAt).toBe(NOW)
  })

  it('brings a boolean back as a boolean', async () => {
    expect((await models.Foundry.findByPk(1, { rejectOnEmpty: true })).isDemo).toBe(true)
    const tree = await models.Tree.findByPk(treeId, { rejectOnEmpty: true })
    expect(tree.isCupFirm).toBe(false)
    await tree.update({ isCupFirm: true })
    await tree.reload()
    expect(tree.isCupFirm).toBe(true)
    expect(tree.get({ plain: true }).isCupFirm).toBe(true)
    expect(await models.Tree.count({ where: { isCupFirm: true } })).toBe(1)
    expect(await models.Tree.count({ where: { isCupFirm: false } })).toBe(0)
    await models.Tree.update({ isCupFirm: false }, { where: { id: treeId } })
    expect(await rows('SELECT is_cup_firm, typeof(is_cup_firm) AS type FROM trees')).toEqual([{ is_cup_firm: 0, type: 'integer' }])
  })

  it('brings JSON back as what it was', async () => {
    const coat = await models.Coat.findByPk(coatId, { rejectOnEmpty: true, include: ['operation'] })
    expect(coat.deviations).toEqual(['still wet', "the crew's word"])
    expect(coat.operation?.response).toEqual({ coats: [{ number: 1 }] })
    await models.Coat.update({ deviations: ['late'] }, { where: { id: coatId } })
    await coat.reload()
    expect(coat.deviations).toEqual(['late'])
    await coat.update({ deviations: [] })
    expect(await rows('SELECT deviations FROM coats')).toEqual([{ deviations: '[]' }])
    const [event] = await models.TreeEvent.findAll()
    expect(event?.detail).toEqual({ coat: 1 })
    await models.JobRun.bulkCreate([
      { job: 'flag', tickAt: 60_000, startedAt: NOW, detail: { flagged: 2 } },
      { job: 'flag', tickAt: 120_000, startedAt: NOW },
    ])
    expect((await models.JobRun.findAll({ order: ['tickAt'] })).map((run) => run.detail)).toEqual([{ flagged: 2 }, {}])
  })

  it('upserts rows with a key of two columns', async () => {
    const hour = {
      sensorId: 1,
      hourStart: 3_600_000,
      doseLikely: 1,
      doseLow: 0.5,
      doseHigh: 2,
      coveredMinutes: 60,
      gapMinutes: 0,
      hasTyped: true,
      typedCount: 1,
      readingCount: 4,
    }
    await models.DoseHour.bulkCreate([hour], { updateOnDuplicate: ['doseLikely', 'hasTyped'] })
    await models.DoseHour.bulkCreate([{ ...hour, doseLikely: 3, hasTyped: false, typedCount: 0 }], {
      updateOnDuplicate: ['doseLikely', 'hasTyped'],
    })
    const [stored, ...others] = await models.DoseHour.findAll()
    expect(others).toEqual([])
    expect(stored).toMatchObject({ doseLikely: 3, hasTyped: false, hourStart: 3_600_000 })
  })

  it('joins a tree with its coats, their author and its recipe', async () => {
    const tree = await models.Tree.findByPk(treeId, {
      rejectOnEmpty: true,
      include: [
        { association: 'coats', include: ['author', 'bath', 'place'] },
        { association: 'recipeVersion', include: ['recipe', 'coats'] },
        'treePieces',
        'treePlaces',
        'holds',
        'lookOvers',
        'releases',
      ],
    })
    expect(tree.coats?.[0]?.author?.name).toBe('Ana')
    expect(tree.recipeVersion?.recipe?.name).toBe('Standard')
    expect(tree.recipeVersion?.coats?.[0]?.isPrewet).toBe(false)
    expect(tree.holds).toEqual([])
  })
})

describe('what the database refuses', () => {
  it('refuses a reference to nothing, inside a transaction and outside', async () => {
    await expect(orphan()).rejects.toThrow('FOREIGN KEY')
    await expect(inTransaction(orphan)).rejects.toThrow('FOREIGN KEY')
  })

  it('refuses to delete what is referred to', async () => {
    await expect(models.Member.destroy({ where: { id: memberId } })).rejects.toThrow('FOREIGN KEY')
  })

  it('never changes history', async () => {
    await expect(models.TreeEvent.update({ kind: 'other' }, { where: { treeId } })).rejects.toMatchObject(
      raised('history is only added to'),
    )
    await expect(models.TreeEvent.destroy({ where: { treeId } })).rejects.toMatchObject(raised('history is only added to'))
  })

  it('never deletes a coat', async () => {
    await expect(models.Coat.destroy({ where: { id: coatId } })).rejects.toMatchObject(raised('coats are withdrawn, never deleted'))
  })

  it('never changes the coats of a recipe version', async () => {
    await expect(models.RecipeCoat.update({ drainSeconds: 30 }, { where: { recipeVersionId } })).rejects.toMatchObject(
      raised('a recipe version never changes'),
    )
    await expect(models.RecipeCoat.destroy({ where: { recipeVersionId } })).rejects.toMatchObject(raised('a recipe version never changes'))
  })
})

describe('inTransaction', () => {
  it('has the settings of the handle outside', async () => {
    expect(await settings()).toEqual([5000, 2, 1])
    expect(await inTransaction(settings)).toEqual([5000, 2, 1])
  })

  it('takes back everything that it awaited when it throws', async () => {
    const before = await titles()
    const failing = inTransaction(async () => {
      await work('Lost 1')
      await inTransaction(() => work('Lost 2'))
      expect(await titles()).toEqual([...before, 'Lost 1', 'Lost 2'].toSorted())
      throw new Error('no')
    })
    await expect(failing).rejects.toThrow('no')
    expect(await titles()).toEqual(before)
  })

  it('keeps two that run side by side apart', async () => {
    const before = await titles()
    const seen: string[][] = []
    const results = await Promise.allSettled([
      inTransaction(async () => {
        await work('Kept')
        await pause()
        seen.push(await titles())
      }),
      inTransaction(async () => {
        await work('Dropped')
        await pause()
        seen.push(await titles())
        throw new Error('no')
      }),
      // Outside both.
      pause()
        .then(titles)
        .then((list) => seen.push(list)),
    ])
    expect(results.map((result) => result.status)).toEqual(['fulfilled', 'rejected', 'fulfilled'])
    expect(seen.filter((list) => list.includes('Dropped'))).toEqual([[...before, 'Dropped', 'Kept'].toSorted()])
    expect(await titles()).toEqual([...before, 'Kept'].toSorted())
  })
})

it('bears a second initialisation in the same process', async () => {
  vi.resetModules()
  const again = await import('@/models/index')
  expect(again.Tree).not.toBe(models.Tree)
  expect(again.database).toBe(database)
  const include = ['coats']
  expect((await again.Tree.findByPk(treeId, { include }))?.coats).toHaveLength(1)
  expect((await models.Tree.findByPk(treeId, { include }))?.coats).toHaveLength(1)
  await again.inTransaction(() => again.inTransaction(() => again.Work.create({ id: newId(), title: 'Again', createdAt: NOW })))
  expect(await titles()).toContain('Again')
})
