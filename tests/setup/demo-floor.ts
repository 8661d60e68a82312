import { NextRequest } from 'next/server'
import { QueryTypes } from 'sequelize'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import type { SeededDemo } from '@/lib/demo/seed'
import type { Queue, QueueTree } from '@/lib/queue/contract'

const MINUTE_MS = 60_000
const HOUR_MS = 60 * MINUTE_MS

/** What hangs on the floor at the first start, whatever the hour. */
const FLOOR = {
  held: 1,
  'bare wax': 1,
  'wax ready': 4,
  overdue: 1,
  'dip now': 3,
  waiting: 5,
  unknown: 1,
  'nearly dry': 2,
  drying: 4,
  wet: 3,
  'last coat on': 3,
  'dried out': 2,
  'ready for burnout': 2,
} as const

type CoatRow = {
  tag: string
  number: number
  kind: string
  planned: string
  placeName: string
  dippedAt: number
  loggedAt: number
  drainSeconds: number
  deviations: string
  reason: string | null
  need: number
  target: number
  p10: number | null
  p90: number | null
  coveredAt: number | null
  atRedip: number | null
  /** People weighed or felt coats of its tree: then the clock knew more than the starting values. */
  isChecked: number
  intakeAt: number | null
}

/** Seeds the demo as if the program were started for the first time at an instant, and holds it to everything that it promises. */
export function describeDemoAt(name: string, iso: string): void {
  describe(`demo foundry first started on ${name}`, () => {
    const now = Date.parse(iso)
    const clock = { now: () => now }
    let seeded: SeededDemo
    let queue: Queue
    let coats: CoatRow[]

    const load = async () => ({
      models: await import('@/models'),
      ...(await import('@/lib/demo/seed')),
      ...(await import('@/lib/queries/queue')),
    })
    const select = async <Row extends object>(sql: string): Promise<Row[]> => {
      const { models } = await load()
      return models.database.query<Row>(sql, { type: QueryTypes.SELECT })
    }
    const inState = (...states: QueueTree['state'][]) => queue.trees.filter((tree) => states.includes(tree.state))

    beforeAll(async () => {
      const { seedDemo, loadQueue } = await load()
      seeded = await seedDemo({ clock, scryptCost: 1024 })
      queue = (await loadQueue({ clock })).queue
      coats = await select<CoatRow>(
        `SELECT t.tag, c.number, c.kind, rc.kind AS planned, p.name AS placeName, c.dipped_at AS dippedAt, c.logged_at AS loggedAt,
                c.drain_seconds AS drainSeconds, c.deviations, c.reason, c.need_reference_hours AS need, rc.moisture_target AS target,
                c.forecast_p10_at AS p10, c.forecast_p90_at AS p90, c.covered_at AS coveredAt, c.moisture_ratio_at_redip AS atRedip,
                t.intake_passed_at AS intakeAt, EXISTS (SELECT 1 FROM evidence e WHERE e.tree_id = t.id) AS isChecked
           FROM coats c JOIN trees t ON t.id = c.tree_id JOIN places p ON p.id = c.place_id
           JOIN recipe_coats rc ON rc.recipe_version_id = t.recipe_version_id AND rc.number = c.number
          ORDER BY t.tag, c.number`,
      )
    }, 240_000)
    afterAll(() => {
      vi.useRealTimers()
    })

    it('has a tree in every state that a tree on the floor can have', () => {
      const counts: Record<string, number> = {}
      for (const { state } of queue.trees) counts[state] = (counts[state] ?? 0) + 1
      expect(counts).toEqual(FLOOR)
    })

    it('has five trees and more to dip at once in each bath', () => {
      const ready = inState('wax ready', 'dip now', 'waiting', 'overdue')
      for (const bath of ['Face slurry', 'Backup slurry']) {
        expect(ready.filter((tree) => tree.next?.bathName === bath).length, bath).toBeGreaterThanOrEqual(5)
      }
    })

    it('has the trees that a tour stops at', () => {
      const [overdue] = inState('overdue')
      expect(overdue?.coats[overdue.coatsOn - 1]?.kind).toBe('face')
      expect(inState('held')[0]?.hold?.reason).toMatch(/Ines/)
      expect(inState('bare wax')[0]?.warnings.map(({ code }) => code)).toContain('intake open')
      const [unknown] = inState('unknown')
      expect(queue.places.find(({ id }) => id === unknown?.place.id)?.needsTypedReading).toBe(true)
      expect(queue.trees.filter(({ willMissPour }) => willMissPour).map(({ title }) => title)).toEqual(['The Ferryman, figure'])
      expect(queue.trees.filter(({ title }) => title.startsWith('Otter Gate, panel'))).toHaveLength(4)
      expect(queue.trees.filter(({ title }) => title.endsWith('pieces')).length).toBeGreaterThanOrEqual(1)
      expect(queue.trees.every(({ isPlanUncalibrated }) => isPlanUncalibrated)).toBe(true)
    })

    it('has a tree with a recess', async () => {
      const [row] = await select<{ n: number }>(
        `SELECT count(*) AS n FROM trees WHERE recess_class <> 'none' AND released_at IS NULL AND scrapped_at IS NULL`,
      )
      expect(row?.n).toBeGreaterThanOrEqual(1)
    })

    it('has a past: shells released, one scrapped and cast again, a hold lifted, looks, stirs and reasons', async () => {
      const [past] = await select<Record<string, number>>(
        `SELECT (SELECT count(*) FROM releases) AS releases, (SELECT count(*) FROM trees WHERE scrapped_at IS NOT NULL) AS scrapped,
                (SELECT count(*) FROM pieces WHERE recast_of IS NOT NULL) AS recast, (SELECT count(*) FROM holds WHERE lifted_at IS NOT NULL) AS lifted,
                (SELECT count(*) FROM evidence) AS evidence, (SELECT count(DISTINCT stirred_at / 86400000) FROM bath_stirs) AS stirredDays,
                (SELECT count(*) FROM coats WHERE rough_minutes > 0) AS rough`,
      )
      expect(past).toMatchObject({ scrapped: 1, recast: 1, lifted: 1, rough: 1 })
      expect(past?.['releases']).toBeGreaterThanOrEqual(5)
      expect(past?.['evidence']).toBeGreaterThanOrEqual(1)
      expect(past?.['stirredDays']).toBeGreaterThanOrEqual(11)
      const odd = coats.filter(({ deviations }) => deviations !== '[]')
      expect(odd.map(({ deviations }) => deviations).toSorted()).toEqual(['["other stucco"]', '["still wet"]'])
      expect(odd.every(({ reason }) => reason !== null)).toBe(true)
    })

    it('puts every coat on in its order, after the one below and after intake, never ahead of the clock', () => {
      for (const [index, coat] of coats.entries()) {
        const below = coats[index - 1]
        const isFirst = below?.tag !== coat.tag
        expect(coat.number, coat.tag).toBe(isFirst ? 1 : below.number + 1)
        expect(coat.dippedAt, coat.tag).toBeGreaterThan((isFirst ? coat.intakeAt : below.dippedAt + 30 * MINUTE_MS) ?? Infinity)
        expect(coat.kind, coat.tag).toBe(coat.planned)
        expect(coat.loggedAt).toBeGreaterThanOrEqual(coat.dippedAt)
        expect(coat.loggedAt).toBeLessThanOrEqual(now)
        expect(isFirst ? coat.dippedAt : below.coveredAt, coat.tag).toBe(coat.dippedAt)
      }
    })

    it('has dips that the drying clock agrees with', async () => {
      const { dryingRoom } = await import('@/lib/demo/drying-room')
      const { demoClimate, DEMO_HISTORY_MS } = await import('@/lib/demo/plan')
      const { DEMO_PLACES, DEMO_PLACE_KEYS, DEMO_SETTING } = await import('@/lib/demo/shop')
      const { moistureRatio } = await import('@/lib/drying/moisture')
      const startsAt = now - DEMO_HISTORY_MS
      const room = dryingRoom(demoClimate(startsAt, DEMO_SETTING.timeZone), { from: startsAt, now, altitudeM: DEMO_SETTING.altitudeM })
      let inside = 0
      let judged = 0
      for (const [index, coat] of coats.entries()) {
        const next = coats[index + 1]
        const isRedipped = next?.tag === coat.tag
        const wasEarly = isRedipped && next.deviations.includes('still wet')
        const isDryEnough = !isRedipped || (coat.atRedip ?? 1) <= coat.target + 1e-6
        expect(isDryEnough, `${coat.tag} ${coat.number}`).toBe(!wasEarly)
        const place = DEMO_PLACE_KEYS.find((key) => DEMO_PLACES[key].name === coat.placeName)
        if (!place || place === 'boatShed' || coat.coveredAt === null) continue
        const start = coat.dippedAt + coat.drainSeconds * 1000
        const dose = room.doseBetween(place, start, coat.coveredAt).likely
        // What was written down then is what the readings say now.
        const byItsNeed = moistureRatio(dose, coat.need, coat.target)
        expect(coat.isChecked === 0 ? coat.atRedip : byItsNeed, `${coat.tag} ${coat.number}`).toBeCloseTo(byItsNeed, 2)
        const dryAt = room.whenDose(place, start, coat.need, 'likely')
        if (dryAt === null || coat.p10 === null || coat.p90 === null) continue
        judged += 1
        if (coat.p10 <= dryAt && dryAt <= coat.p90) inside += 1
      }
      expect(judged).toBeGreaterThan(90)
      expect(inside / judged).toBeGreaterThan(0.8)
    })

    it('has coats that were weighed, felt and measured, from which the calibration proposes more hours for backup coats', async () => {
      const { loadCalibration } = await import('@/lib/queries/calibration')
      const page = await loadCalibration(now)
      expect(page.outcomeCount).toBeGreaterThanOrEqual(40)
      expect(page.countedCount).toBeGreaterThanOrEqual(20)
      expect(page.clock.count).toBeGreaterThanOrEqual(15)
      const open = page.recipes.flatMap((recipe) => recipe.coats.filter(({ verdict }) => verdict === 'change'))
      const told = page.recipes.flatMap((recipe) =>
        recipe.coats.map(({ coat, learned }) => `${coat.kind} ${learned.count}: ${learned.mean.toFixed(2)}`),
      )
      expect(open.length, told.join(', ')).toBeGreaterThanOrEqual(1)
      expect(open.some(({ coat, needAfter }) => coat.kind === 'backup' && needAfter > coat.needReferenceHours)).toBe(true)
      const kinds = await select<{ kind: string; n: number; withdrawn: number }>(
        'SELECT kind, count(*) AS n, count(withdrawn_at) AS withdrawn FROM evidence GROUP BY kind ORDER BY kind',
      )
      expect(kinds.map(({ kind }) => kind)).toEqual(['surface temperature', 'touch', 'weighing'])
      expect(kinds.reduce((sum, { withdrawn }) => sum + withdrawn, 0)).toBe(1)
    })

    it('has two weeks of five-minute readings with one gap', async () => {
      const rows = await select<{ sensorId: number; at: number; source: string }>(
        'SELECT sensor_id AS sensorId, measured_at AS at, source FROM readings ORDER BY sensor_id, measured_at',
      )
      const sent = rows.filter(({ source }) => source === 'sensor')
      const gaps = sent.flatMap((row, index) => {
        const before = sent[index - 1]
        return before?.sensorId === row.sensorId && row.at - before.at > 5 * MINUTE_MS ? [(row.at - before.at) / HOUR_MS] : []
      })
      expect(gaps).toHaveLength(1)
      expect(gaps[0]).toBeGreaterThan(2)
      expect(sent.length).toBeGreaterThan(2 * 14 * 24 * 12)
      expect(queue.rooms.map(({ isStale }) => isStale)).toEqual([false, false, true])
    })

    it('is not made twice', async () => {
      const { seedDemo } = await load()
      await expect(seedDemo({ clock, scryptCost: 1024 })).rejects.toMatchObject({ code: 'conflict' })
    })

    it('gives one sign-in for each role, and they work', async () => {
      const { loadDemoSignIns } = await import('@/lib/queries/demo-sign-ins')
      const { signIn } = await import('@/lib/commands/sign-in')
      const signIns = await loadDemoSignIns()
      expect(signIns).toEqual(seeded.signIns)
      expect(signIns.map(({ role }) => role).toSorted()).toEqual(['crew', 'operator', 'owner', 'supervisor'])
      for (const { email, password } of signIns) {
        expect(password.length).toBeGreaterThanOrEqual(12)
        expect(await signIn({ email, password, userAgent: 'test', device: null }, { clock })).toMatchObject({ outcome: 'signed in' })
      }
    })

    it('has two trees that come to their guard within ten minutes, with the readings that its feed sends', async () => {
      const { feedDemo } = await import('@/jobs/demo-feed')
      const { POST } = await import('@/app/api/v1/readings/route')
      const { loadQueue } = await load()
      const soon = inState('nearly dry').map(({ id }) => id)
      const door: typeof fetch = async (input, init) => {
        const request = new Request(input, init)
        const body = await request.text()
        return POST(new NextRequest(request.url, { method: 'POST', headers: request.headers, body }), { params: Promise.resolve({}) })
      }
      const turnedAt = new Map<string, number>()
      for (const minute of [3, 6, 8, 10]) {
        const at = now + minute * MINUTE_MS
        vi.useFakeTimers({ toFake: ['Date'], now: at })
        const parts = { clock: { now: () => at }, fetch: door, baseUrl: 'http://127.0.0.1:3000', tokens: seeded.sensorTokens }
        expect(await feedDemo(parts)).toBeGreaterThanOrEqual(2)
        const { queue: later } = await loadQueue({ clock: { now: () => at } })
        for (const tree of later.trees) {
          if (soon.includes(tree.id) && tree.state === 'dip now' && !turnedAt.has(tree.id)) turnedAt.set(tree.id, minute)
        }
        vi.useRealTimers()
      }
      expect(turnedAt.size).toBe(2)
      expect([...turnedAt.values()].every((minute) => minute > 3)).toBe(true)
    })

    it('is taken away whole, so that the next visitor sets up their own', async () => {
      const { models } = await load()
      const { removeDemo } = await import('@/lib/demo/remove-demo')
      const { id, name: ownerName, role } = await models.Member.findOne({ where: { role: 'owner' }, rejectOnEmpty: true })
      const answer = await removeDemo({ member: { id, name: ownerName, role, isDemo: true }, clock })
      expect(answer).toMatchObject({ kept: [], isEmptied: true })
      const tables = await select<{ table: string }>(`SELECT name AS "table" FROM sqlite_schema WHERE type = 'table'`)
      const left = await Promise.all(tables.map(async ({ table }) => ({ table, rows: await select<object>(`SELECT * FROM "${table}"`) })))
      expect(
        left
          .filter(({ rows }) => rows.length > 0)
          .map(({ table }) => table)
          .toSorted(),
      ).toEqual(['migrations', 'sqlite_sequence'])
    })
  })
}
