import { QueryTypes } from 'sequelize'
import { addFoundryEvent } from '@/lib/commands/foundry-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { dropDemoTokens } from '@/lib/demo/token-file'
import type { Actor } from '@/lib/members/actor'
import { Closure, database, Foundry, inTransaction, Member, ShiftHours, Tree } from '@/models'

/** Something of the demo that real rows stand on: it stays, and is no longer marked. */
export type KeptThing = { kind: 'recipe' | 'bath' | 'place' | 'sensor' | 'work' | 'member'; name: string }

export type RemovedDemo = {
  treeCount: number
  kept: KeptThing[]
  /** The whole foundry was the demo: nothing is left, and the next visitor sets up their own. */
  isEmptied: boolean
}

/**
 * Takes away every row that the demo brought, in one transaction, with all that hangs on it: coats, readings, notices, sign-ins, history.
 * What real rows stand on (the recipe of a real tree, its place and that place's sensor) stays, loses its mark and is named.
 * In a whole demo foundry nothing stays, and the first run begins again.
 *
 * @throws {AppError} conflict where there is no demo data.
 */
export async function removeDemo({ member, clock }: { member: Actor; clock: Clock }): Promise<RemovedDemo> {
  const removed = await inTransaction(async () => {
    const foundry = await Foundry.findByPk(1, { rejectOnEmpty: true })
    if ((await Member.count({ where: { isDemo: true } })) === 0) throw new AppError('conflict', 'There is no demo data here.')
    const treeCount = await Tree.count({ where: { isDemo: true } })
    await removeTokens()
    const kept = await keepWhatIsStoodOn()
    await removeTrees()
    await removeWorks()
    await removeShop()
    kept.push(...(await removePeople(clock.now())))
    if (foundry.isDemo) return { treeCount, kept, isEmptied: await closeFoundry(foundry) }
    const names = kept.map(({ kind, name }) => `${kind} ${name}`)
    const text = `Demo data removed: ${treeCount} trees.${names.length === 0 ? '' : ` Kept, because real trees stand on it: ${names.join(', ')}.`}`
    await addFoundryEvent({ type: 'demo' }, { kind: 'demo data removed', by: member, at: clock.now(), text })
    return { treeCount, kept, isEmptied: false }
  })
  await dropDemoTokens()
  return removed
}

const run = (sql: string): Promise<number> => database.query(sql, { type: QueryTypes.BULKDELETE })

const DEMO = (table: string) => `(SELECT id FROM ${table} WHERE is_demo = 1)`
const REAL_TREES = '(SELECT id FROM trees WHERE is_demo = 0)'

/** In this order: a recipe that stays holds its baths, a place that stays its sensor. */
const STOOD_ON: readonly { kind: KeptThing['kind']; table: string; name: string; by: string }[] = [
  {
    kind: 'recipe',
    table: 'recipes',
    name: 'name',
    // A version that somebody of this foundry has made is their work.
    by: `SELECT recipe_id FROM recipe_versions
          WHERE id IN (SELECT recipe_version_id FROM trees WHERE is_demo = 0) OR created_by IN (SELECT id FROM members WHERE is_demo = 0)`,
  },
  {
    kind: 'bath',
    table: 'baths',
    name: 'name',
    by: `SELECT c.bath_id FROM recipe_coats c JOIN recipe_versions v ON v.id = c.recipe_version_id JOIN recipes r ON r.id = v.recipe_id WHERE r.is_demo = 0
          UNION SELECT bath_id FROM coats WHERE tree_id IN ${REAL_TREES}`,
  },
  {
    kind: 'place',
    table: 'places',
    name: 'name',
    by: `SELECT place_id FROM tree_places WHERE tree_id IN ${REAL_TREES} UNION SELECT place_id FROM coats WHERE tree_id IN ${REAL_TREES}`,
  },
  {
    kind: 'sensor',
    table: 'sensors',
    name: 'name',
    // A token that somebody of this foundry has made is in a logger of theirs.
    by: `SELECT sensor_id FROM places WHERE is_demo = 0 UNION SELECT sensor_id FROM former_airs WHERE place_id IN (SELECT id FROM places WHERE is_demo = 0)
          UNION SELECT sensor_id FROM sensor_tokens WHERE created_by IN (SELECT id FROM members WHERE is_demo = 0)
          UNION SELECT sensor_id FROM mqtt_topics WHERE is_demo = 0`,
  },
  {
    kind: 'work',
    table: 'works',
    name: 'title',
    by: `SELECT s.work_id FROM sections s JOIN pieces p ON p.section_id = s.id JOIN tree_pieces t ON t.piece_id = p.id WHERE t.tree_id IN ${REAL_TREES}`,
  },
]

/**
 * Before anything loses its mark: a logger that stays must not be fed any more. Of a demo sensor the tokens that Kilnward made for its
 * own feed go too; one that somebody of this foundry has made stays, with its sensor. The same goes for topics of a broker.
 */
async function removeTokens(): Promise<void> {
  await run('DELETE FROM mqtt_topics WHERE is_demo = 1')
  await run(`DELETE FROM sensor_tokens WHERE created_by IN ${DEMO('members')} OR (created_by IS NULL AND sensor_id IN ${DEMO('sensors')})`)
}

async function keepWhatIsStoodOn(): Promise<KeptThing[]> {
  const kept: KeptThing[] = []
  for (const { kind, table, name, by } of STOOD_ON) {
    const rows = await database.query<{ name: string }>(
      `UPDATE ${table} SET is_demo = 0 WHERE is_demo = 1 AND id IN (${by}) RETURNING ${name} AS name`,
      { type: QueryTypes.SELECT },
    )
    kept.push(...rows.map((row) => ({ kind, name: row.name })))
  }
  return kept
}

async function removeTrees(): Promise<void> {
  const trees = DEMO('trees')
  const notices = `(SELECT id FROM notices WHERE tree_id IN ${trees}
    OR (subject_type = 'sensor' AND subject_id IN (SELECT CAST(id AS TEXT) FROM sensors WHERE is_demo = 1))
    OR (subject_type = 'member' AND subject_id IN ${DEMO('members')}))`
  await run(`DELETE FROM deliveries WHERE notice_id IN ${notices} OR member_id IN ${DEMO('members')}`)
  await run(`DELETE FROM notices WHERE id IN ${notices}`)
  await run(`DELETE FROM evidence WHERE tree_id IN ${trees}`)
  await run(`DELETE FROM look_overs WHERE tree_id IN ${trees}`)
  // Marked by their missing coats: an operation whose run was on demo trees alone goes with them.
  await run(`CREATE TEMP TABLE demo_operations AS SELECT DISTINCT operation_id FROM coats WHERE tree_id IN ${trees}`)
  for (const table of ['holds', 'releases', 'tree_watches', 'tree_events', 'coats', 'tree_places']) {
    await run(`DELETE FROM ${table} WHERE tree_id IN ${trees}`)
  }
  await run(`DELETE FROM operations WHERE (operation_id IN (SELECT operation_id FROM demo_operations) OR member_id IN ${DEMO('members')})
    AND operation_id NOT IN (SELECT operation_id FROM coats)`)
  await run('DROP TABLE demo_operations')
}

/** The trees themselves go with their pieces. A piece that a real one replaces stays, since that one is its recast. */
async function removeWorks(): Promise<void> {
  await run(`CREATE TEMP TABLE demo_pieces AS
    SELECT piece_id AS id FROM tree_pieces WHERE tree_id IN ${DEMO('trees')}
     UNION SELECT p.id FROM pieces p JOIN sections s ON s.id = p.section_id WHERE s.work_id IN ${DEMO('works')}`)
  await run(`DELETE FROM tree_pieces WHERE tree_id IN ${DEMO('trees')}`)
  await run('DELETE FROM trees WHERE is_demo = 1')
  const loose = `DELETE FROM pieces WHERE id IN (SELECT id FROM demo_pieces) AND id NOT IN (SELECT piece_id FROM tree_pieces)
    AND id NOT IN (SELECT recast_of FROM pieces WHERE recast_of IS NOT NULL)`
  // The newest recast first: each round frees the piece that it was made for.
  while ((await run(loose)) > 0);
  await run(`DELETE FROM sections WHERE work_id IN ${DEMO('works')}`)
  await run('DELETE FROM works WHERE is_demo = 1')
  await run('DROP TABLE demo_pieces')
}

async function removeShop(): Promise<void> {
  const [members, recipes, baths, places, sensors] = ['members', 'recipes', 'baths', 'places', 'sensors'].map(DEMO)
  const versions = `(SELECT id FROM recipe_versions WHERE recipe_id IN ${recipes})`
  const calibrated = `recipe_id IN ${recipes} OR place_id IN ${places} OR member_id IN ${members}`
  await run(
    `DELETE FROM calibrations WHERE goes_back_on IS NOT NULL
      AND (${calibrated} OR goes_back_on IN (SELECT id FROM calibrations WHERE ${calibrated}))`,
  )
  await run(`DELETE FROM calibrations WHERE ${calibrated}`)
  await run(`DELETE FROM recipe_coats WHERE recipe_version_id IN ${versions}`)
  await run(`DELETE FROM recipe_versions WHERE recipe_id IN ${recipes}`)
  await run('DELETE FROM recipes WHERE is_demo = 1')
  await run(`DELETE FROM bath_stirs WHERE bath_id IN ${baths} OR member_id IN ${members}`)
  await run('DELETE FROM baths WHERE is_demo = 1')
  for (const table of ['fan_hours', 'fan_switches', 'former_airs']) await run(`DELETE FROM ${table} WHERE place_id IN ${places}`)
  await run('DELETE FROM places WHERE is_demo = 1')
  for (const table of ['readings', 'set_aside_readings', 'dose_hours', 'sensor_tokens', 'sensor_offsets', 'sensor_devices', 'uploads']) {
    await run(`DELETE FROM ${table} WHERE sensor_id IN ${sensors}`)
  }
  await run('DELETE FROM sensors WHERE is_demo = 1')
  await run(`UPDATE recipe_versions SET created_by = NULL WHERE created_by IN ${members}`)
  for (const table of ['readings', 'set_aside_readings', 'sensor_offsets']) {
    await run(`UPDATE ${table} SET entered_by = NULL WHERE entered_by IN ${members}`)
  }
  await run(`UPDATE sensor_devices SET noted_by = NULL WHERE noted_by IN ${members}`)
  await run(`UPDATE uploads SET created_by = NULL WHERE created_by IN ${members}`)
}

/** Takes the demo's people away, but for one whose name stands in a real row, which only somebody who let them sign in can have brought about. */
async function removePeople(now: number): Promise<KeptThing[]> {
  const members = DEMO('members')
  await run('DELETE FROM foundry_events WHERE is_demo = 1')
  await run(
    `DELETE FROM sign_in_waits WHERE EXISTS (SELECT 1 FROM members
      WHERE is_demo = 1 AND (subject = 'member:' || email OR substr(subject, 1, length(email) + 8) = 'member:' || email || ':'))`,
  )
  for (const table of ['sessions', 'push_subscriptions', 'tree_watches']) await run(`DELETE FROM ${table} WHERE member_id IN ${members}`)
  const naming = await database.query<{ table: string; column: string }>(
    `SELECT t.name AS "table", f."from" AS "column" FROM sqlite_schema t JOIN pragma_foreign_key_list(t.name) f
      WHERE t.type = 'table' AND f."table" = 'members'`,
    { type: QueryTypes.SELECT },
  )
  const named = naming.map(({ table, column }) => `SELECT ${column} FROM ${table}`).join(' UNION ')
  const kept = await database.query<{ name: string }>(
    `UPDATE members SET is_demo = 0, disabled_at = coalesce(disabled_at, :now) WHERE is_demo = 1 AND id IN (${named}) RETURNING name`,
    { type: QueryTypes.SELECT, replacements: { now } },
  )
  await run('DELETE FROM members WHERE is_demo = 1')
  return kept.map(({ name }) => ({ kind: 'member', name }))
}

/** The end of a foundry that was the demo itself. @returns false where somebody real works in it, whose foundry it then is. */
async function closeFoundry(foundry: Foundry): Promise<boolean> {
  if ((await Member.count()) > 0) {
    await foundry.update({ isDemo: false })
    return false
  }
  await ShiftHours.destroy({ where: {} })
  await Closure.destroy({ where: {} })
  for (const table of ['mqtt_broker', 'mqtt_messages', 'mqtt_hours']) await run(`DELETE FROM ${table}`)
  await foundry.destroy()
  return true
}
