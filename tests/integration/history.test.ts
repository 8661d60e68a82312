import { QueryTypes } from 'sequelize'
import { beforeAll, describe, expect, it, vi } from 'vitest'
import type { HistoryFilter } from '@/lib/history/history-filter'
import type { Actor } from '@/lib/members/actor'

const { loadHistory, HISTORY_PAGE_LINES } = await import('@/lib/queries/history')
const { readHistoryCursor } = await import('@/lib/history/history-filter')
const { addFoundryEvent } = await import('@/lib/commands/foundry-event')
const { addTreeEvent } = await import('@/lib/commands/tree-event')
const { buildFoundry, buildMember, buildTree, DAY_START, NOW } = await import('@/tests/factories/shell-room').then((factories) => ({
  ...factories,
  DAY_START: Date.parse('2026-10-12T23:00:00Z'),
}))
const { database, FoundryEvent, TreeEvent } = await import('@/models')

const ALL: HistoryFilter = { memberId: null, tag: null, kind: null, fromDay: null, toDay: null }
const MANY = 6000
const TIME_ZONE = 'Europe/London'

let ines: Actor
let tags: string[]
let placeId: string

const page = (filter: Partial<HistoryFilter> = {}, before?: string | null) =>
  loadHistory({ ...ALL, ...filter }, { cursor: before ? readHistoryCursor({ before }) : null, timeZone: TIME_ZONE })

beforeAll(async () => {
  const foundry = await buildFoundry()
  placeId = foundry.placeId
  ines = { ...(await buildMember('supervisor', 'Ines')), device: 'Firefox on Windows' }
  const maud = await buildMember('operator', 'Maud')
  const trees = [await buildTree(foundry), await buildTree(foundry)]
  tags = trees.map(({ tag }) => tag)
  // Many lines of one moment, so that an order by time alone would lose or repeat some between pages.
  const at = (index: number) => NOW - 400 * 86_400_000 + Math.floor(index / 7) * 60_000
  await TreeEvent.bulkCreate(
    Array.from({ length: MANY }, (_, index) => ({
      treeId: trees[index % 2 === 0 ? 0 : 1]!.id,
      kind: ['coat on', 'moved', 'notice'][index % 3]!,
      memberId: index % 3 === 2 ? null : maud.id,
      at: at(index),
      detail: { text: `Line ${index}` },
    })),
  )
  await FoundryEvent.bulkCreate(
    Array.from({ length: MANY }, (_, index) => ({
      kind: ['place changed', 'recipe changed'][index % 2]!,
      subjectType: 'place',
      subjectId: placeId,
      subjectName: 'Rack',
      memberId: maud.id,
      at: at(index),
      detail: { text: `Change ${index}` },
    })),
  )
  await addTreeEvent(trees[0]!.id, 'held', { by: ines, at: NOW, text: 'Held: crack.' })
  await addFoundryEvent(
    { type: 'place', id: placeId, name: 'Fan rack' },
    { kind: 'place changed', by: ines, at: NOW, text: 'Fan rack changed.', before: { placeId }, after: { placeId: null } },
  )
}, 120_000)

describe('loadHistory', () => {
  it('puts both tables into one list, newest first, with who, from where, and what it leads to', async () => {
    const { lines, members, kinds, names } = await page()
    expect(lines).toHaveLength(HISTORY_PAGE_LINES)
    expect(lines[0]).toMatchObject({
      text: 'Held: crack.',
      by: 'Ines',
      device: 'Firefox on Windows',
      subject: { type: 'tree', name: tags[0], href: `/trees/${tags[0]}` },
    })
    expect(lines[1]).toMatchObject({ by: 'Ines', subject: { name: 'Fan rack', href: '/settings/places' }, before: { placeId } })
    expect(names.get(placeId)).toBeDefined()
    expect(members.map(({ name }) => name)).toEqual(['Ines', 'Maud'])
    expect(kinds).toEqual(['coat on', 'held', 'moved', 'notice', 'place changed', 'recipe changed'])
  })

  it('turns from page to page without losing or repeating a line, and ends', async () => {
    const filter = { kind: 'moved' }
    const seen: string[] = []
    let before: string | null = null
    do {
      const { lines, older } = await page(filter, before)
      expect(lines.map(({ at }) => at)).toEqual(lines.map(({ at }) => at).toSorted((one, other) => other - one))
      seen.push(...lines.map(({ key }) => key))
      before = older
    } while (before)
    expect(new Set(seen).size).toBe(seen.length)
    expect(seen).toHaveLength(await TreeEvent.count({ where: filter }))
  })

  it('steps across the two tables at one moment', async () => {
    const first = await page()
    const second = await page({}, first.older)
    const third = await page({}, second.older)
    const rows = await database.query<{ key: string }>(
      `SELECT at || '.' || source || '.' || id AS key FROM (
         SELECT at, 'tree' AS source, 1 AS rank, id FROM tree_events UNION ALL SELECT at, 'foundry', 0, id FROM foundry_events
       ) ORDER BY at DESC, rank DESC, id DESC LIMIT 150`,
      { type: QueryTypes.SELECT },
    )
    expect([...first.lines, ...second.lines, ...third.lines].map(({ key }) => key)).toEqual(rows.map(({ key }) => key))
  })

  it('takes each filter alone and all together', async () => {
    const texts = async (filter: Partial<HistoryFilter>) => (await page(filter)).lines.map(({ text }) => text)
    expect(await texts({ memberId: ines.id })).toEqual(['Held: crack.', 'Fan rack changed.'])
    expect(await texts({ tag: tags[0]!, kind: 'held' })).toEqual(['Held: crack.'])
    expect(await texts({ tag: tags[1]!, kind: 'held' })).toEqual([])
    expect(await texts({ fromDay: '2026-10-13' })).toEqual(['Held: crack.', 'Fan rack changed.'])
    expect(await texts({ memberId: ines.id, tag: tags[0]!, kind: 'held', fromDay: '2026-10-13', toDay: '2026-10-13' })).toHaveLength(1)
    expect(await texts({ toDay: '2020-01-01' })).toEqual([])
    expect((await page({ memberId: 'kilnward' })).lines.every(({ by }) => by === null)).toBe(true)
    expect((await page({ toDay: '2026-10-12' })).lines.every(({ at }) => at < DAY_START)).toBe(true)
  })

  it('says when there is no such tree', async () => {
    expect(await page({ tag: 'ZZ-99999' })).toMatchObject({ isTreeKnown: false, lines: [], older: null })
  })

  it('walks along an index for every filter, with no scan and no sorting', async () => {
    const asked: string[] = []
    const query = database.query.bind(database)
    const spy = vi.spyOn(database, 'query').mockImplementation((...args: Parameters<typeof query>) => {
      const [sql, options] = args
      if (typeof sql === 'string' && /FROM (?:tree|foundry)_events/.test(sql)) asked.push(withValues(sql, options?.replacements))
      return query(...args)
    })
    const older = (await page()).older
    for (const memberId of [null, ines.id, 'kilnward']) {
      for (const tag of [null, tags[0]!]) {
        for (const kind of [null, 'held']) {
          for (const fromDay of [null, '2026-10-01']) await page({ memberId, tag, kind, fromDay, toDay: fromDay }, fromDay ? older : null)
        }
      }
    }
    spy.mockRestore()
    expect(asked.length).toBeGreaterThan(50)
    for (const sql of new Set(asked)) {
      const steps = await database.query<{ detail: string }>(`EXPLAIN QUERY PLAN ${sql}`, { type: QueryTypes.SELECT })
      const plan = steps.map(({ detail }) => detail).join('; ')
      const ofEvents = steps.map(({ detail }) => detail).filter((detail) => /(?:tree|foundry)_events/.test(detail))
      expect(ofEvents.length, sql).toBeGreaterThan(0)
      expect(
        ofEvents.every((detail) => /^SEARCH .* USING (?:COVERING )?INDEX/.test(detail)),
        `${sql}\n${plan}`,
      ).toBe(true)
      expect(plan, sql).not.toContain('TEMP B-TREE')
    }
  })
})

/** The statement with its values in it, for EXPLAIN. */
function withValues(sql: string, replacements: unknown): string {
  const values = Object.entries((replacements ?? {}) as Record<string, unknown>)
  return values.reduce(
    (text, [name, value]) => text.replaceAll(new RegExp(`:${name}\\b`, 'g'), JSON.stringify(value ?? null).replaceAll('"', "'")),
    sql,
  )
}

describe('the tables', () => {
  const raised = { parent: { message: 'SQLITE_CONSTRAINT: history is only added to' } }

  it.each(['tree_events', 'foundry_events'])('%s takes no UPDATE, no DELETE and no REPLACE', async (table) => {
    const count = () => database.query(`SELECT count(*) AS n, sum(at) AS t FROM ${table}`, { type: QueryTypes.SELECT })
    const before = await count()
    for (const sql of [
      `UPDATE ${table} SET at = at - 1`,
      `UPDATE ${table} SET detail = '{}' WHERE id = 1`,
      `DELETE FROM ${table}`,
      `DELETE FROM ${table} WHERE id = 1`,
      `INSERT OR REPLACE INTO ${table} SELECT * FROM ${table} WHERE id = 1`,
    ]) {
      await expect(database.query(sql)).rejects.toMatchObject(raised)
    }
    expect(await count()).toEqual(before)
  })

  it('models cannot pass them by', async () => {
    await expect(TreeEvent.update({ kind: 'x' }, { where: { id: 1 } })).rejects.toMatchObject(raised)
    await expect(FoundryEvent.destroy({ where: {} })).rejects.toMatchObject(raised)
  })
})
