import { millisecondsInHour } from 'date-fns/constants'
import { QueryTypes } from 'sequelize'
import { z } from 'zod'
import type { CoatingWay } from '@/lib/coats/vocabulary'
import { UNDO_MS } from '@/lib/coats/undo-window'
import type { Clock } from '@/lib/core/clock'
import { dryingCurve } from '@/lib/drying/drying-curve'
import { may, type Role } from '@/lib/members/roles'
import { loadFloor, type Floor } from '@/lib/queries/floor'
import { loadReadingsInRange } from '@/lib/queries/load-climate'
import { queueTree } from '@/lib/queue/assemble'
import { humidityOf, type AirStretch } from '@/lib/room/climate'
import type { DerivedTree } from '@/lib/trees/derive'
import { whyOf } from '@/lib/trees/why'
import type { CoatEvidence, CoatRow, TreeDetail } from '@/lib/trees/detail-contract'
import { clockStart } from '@/lib/trees/facts'
import { airAround, dryingSpans } from '@/lib/trees/spans'
import { Coat, database, Member, RecipeVersion, Tree } from '@/models'

/** The chart is some 700 px wide: more points would not be seen. */
const CURVE_POINTS = 120
const CLIMATE_POINTS = 300

const select = <Row extends object>(sql: string, treeId: string) =>
  database.query<Row>(sql, { type: QueryTypes.SELECT, replacements: { treeId } })

/** Everything the page of one tree shows; null when there is no such tag. */
export async function loadTreeDetail({
  tag,
  viewer,
  clock,
}: {
  tag: string
  viewer: { id: string; role: Role }
  clock: Clock
}): Promise<TreeDetail | null> {
  const now = clock.now()
  const tree = await Tree.findOne({ where: { tag } })
  if (!tree) return null
  const floor = await loadFloor({ now, trees: { ids: [tree.id] } })
  const derived = floor.trees[0]
  if (!derived) return null
  const [coats, climate, holds, lookOvers, releases, history, pieces, creator, passer, watches] = await Promise.all([
    coatRows(derived, floor, now),
    climatePoints(derived, floor, now),
    select<TreeDetail['holds'][number]>(
      `SELECT h.id, h.reason, m.name AS "by", h.held_at AS at, l.name AS liftedBy, h.lifted_at AS liftedAt, h.lift_reason AS liftReason
         FROM holds h JOIN members m ON m.id = h.held_by LEFT JOIN members l ON l.id = h.lifted_by WHERE h.tree_id = :treeId ORDER BY h.held_at DESC`,
      tree.id,
    ),
    select<TreeDetail['lookOvers'][number]>(
      `SELECT o.id, o.note, m.name AS "by", o.looked_over_at AS at, c.number AS coatNumber FROM look_overs o
         JOIN members m ON m.id = o.member_id JOIN coats c ON c.id = o.coat_id WHERE o.tree_id = :treeId ORDER BY o.looked_over_at DESC`,
      tree.id,
    ),
    select<NonNullable<TreeDetail['release']>>(
      `SELECT m.name AS "by", r.released_at AS at, r.confirmed_by AS confirmedBy FROM releases r JOIN members m ON m.id = r.released_by
        WHERE r.tree_id = :treeId AND r.withdrawn_at IS NULL`,
      tree.id,
    ),
    select<{ id: number; at: number; by: string | null; detail: string }>(
      `SELECT e.id, e.at, m.name AS "by", e.detail FROM tree_events e LEFT JOIN members m ON m.id = e.member_id
        WHERE e.tree_id = :treeId ORDER BY e.at DESC, e.id DESC LIMIT 200`,
      tree.id,
    ),
    select<{ id: string; workId: string; workTitle: string; sectionName: string; editionNumber: number; isRecast: number }>(
      `SELECT p.id, w.id AS workId, w.title AS workTitle, s.name AS sectionName, p.edition_number AS editionNumber, p.recast_of IS NOT NULL AS isRecast
         FROM tree_pieces tp JOIN pieces p ON p.id = tp.piece_id JOIN sections s ON s.id = p.section_id JOIN works w ON w.id = s.work_id
        WHERE tp.tree_id = :treeId ORDER BY w.title, s.name, p.edition_number`,
      tree.id,
    ),
    tree.createdBy ? Member.findByPk(tree.createdBy) : null,
    tree.intakePassedBy ? Member.findByPk(tree.intakePassedBy) : null,
    database.query<{ found: number }>('SELECT 1 AS found FROM tree_watches WHERE tree_id = :treeId AND member_id = :memberId', {
      type: QueryTypes.SELECT,
      replacements: { treeId: tree.id, memberId: viewer.id },
    }),
  ])
  const version = await RecipeVersion.findByPk(tree.recipeVersionId, { rejectOnEmpty: true })
  return {
    tree: queueTree(derived, floor.context.places),
    recipe: {
      id: version.recipeId,
      versionId: version.id,
      name: derived.facts.recipe.name,
      version: version.version,
      isCalibrated: derived.facts.recipe.coats.every((coat) => coat.isCalibrated),
    },
    waxMassKg: tree.waxMassKg,
    cupKind: tree.cupKind,
    cupVolumeL: tree.cupVolumeL,
    recessClass: tree.recessClass,
    spacing: tree.spacing,
    hungMassKg: tree.hungMassKg,
    createdAt: tree.createdAt,
    createdBy: creator?.name ?? null,
    pieces: pieces.map((piece) => ({ ...piece, isRecast: piece.isRecast === 1 })),
    intake: {
      waxSurface: tree.waxSurface,
      isWaxAtRoomTemp: tree.isWaxAtRoomTemp,
      isCupFirm: tree.isCupFirm,
      areVentsAndCorePinsIn: tree.areVentsAndCorePinsIn,
      passedAt: tree.intakePassedAt,
      passedBy: passer?.name ?? null,
    },
    coats,
    curve: curveOf(derived, floor, now),
    why: whyOf(derived, floor.context),
    climate,
    holds,
    lookOvers,
    release: releases[0] ?? null,
    history: history.map(({ detail, ...line }) => ({ ...line, text: textOf(detail) })),
    isWatched: watches.length > 0,
    takeBack: await takeBackOf(derived, viewer, now),
  }
}

function textOf(detail: string): string {
  const parsed: unknown = JSON.parse(detail)
  return typeof parsed === 'object' && parsed !== null && 'text' in parsed ? String(parsed.text) : ''
}

type StoredCoat = {
  id: string
  number: number
  way: CoatingWay
  dippedAt: number
  roughMinutes: number
  drainSeconds: number
  by: string
  placeName: string
  bathName: string
  airTempC: number | null
  relHumidityPct: number | null
  meanRelHumidityPct: number | null
  worstRelHumidityPct: number | null
  moistureRatioAtRedip: number | null
  coveredAt: number | null
  p10At: number | null
  p50At: number | null
  p90At: number | null
  deviations: string
  reason: string | null
}

type StoredEvidence = CoatEvidence & { coatId: string }

async function coatRows(derived: DerivedTree, floor: Floor, now: number): Promise<CoatRow[]> {
  const { facts, call, newest } = derived
  const [stored, evidence] = await Promise.all([
    select<StoredCoat>(
      `SELECT c.id, c.number, c.way, c.dipped_at AS dippedAt, c.rough_minutes AS roughMinutes, c.drain_seconds AS drainSeconds, m.name AS "by",
              p.name AS placeName, b.name AS bathName, c.air_temp_c AS airTempC, c.rel_humidity_pct AS relHumidityPct,
              c.mean_rel_humidity_pct AS meanRelHumidityPct, c.worst_rel_humidity_pct AS worstRelHumidityPct,
              c.moisture_ratio_at_redip AS moistureRatioAtRedip, c.covered_at AS coveredAt, c.forecast_p10_at AS p10At, c.forecast_p50_at AS p50At,
              c.forecast_p90_at AS p90At, c.deviations, c.reason
         FROM coats c JOIN members m ON m.id = c.logged_by JOIN places p ON p.id = c.place_id JOIN baths b ON b.id = c.bath_id
        WHERE c.tree_id = :treeId AND c.withdrawn_at IS NULL ORDER BY c.number DESC`,
      facts.id,
    ),
    select<StoredEvidence>(
      `SELECT e.coat_id AS coatId, e.id, e.kind, e.spot, e.verdict, e.moment, e.mass_kg AS massKg, e.surface_temp_c AS surfaceTempC,
              e.air_temp_c AS airTempC, e.taken_at AS at, m.name AS "by", e.member_id AS memberId, e.logged_at AS loggedAt, e.moisture_ratio AS moistureRatio,
              e.withdrawn_at AS withdrawnAt, w.name AS withdrawnBy, e.withdrawn_reason AS withdrawnReason
         FROM evidence e JOIN coats c ON c.id = e.coat_id JOIN members m ON m.id = e.member_id LEFT JOIN members w ON w.id = e.withdrawn_by
        WHERE e.tree_id = :treeId AND c.withdrawn_at IS NULL ORDER BY e.taken_at, e.id`,
      facts.id,
    ),
  ])
  const planned = facts.recipe.coats
    .filter((coat) => coat.number > facts.coats.length)
    .toReversed()
    .map((coat): CoatRow => {
      const dip = derived.plannedDips.find((candidate) => candidate.number === coat.number)
      return {
        number: coat.number,
        kind: coat.kind,
        stucco: coat.stucco,
        bathName: coat.bathName,
        isNewest: false,
        on: null,
        planned: dip && dip.likelyAt !== null ? { likelyAt: dip.likelyAt, safeAt: dip.safeAt } : null,
      }
    })
  const on = stored.map((row): CoatRow => {
    const coat = facts.coats.find((candidate) => candidate.id === row.id)
    const isNewest = row.id === newest?.id
    const soFar = isNewest ? humidityOf(airAround(floor.context, facts.stays, row.dippedAt, now)) : null
    return {
      number: row.number,
      kind: coat?.kind ?? 'backup',
      stucco: coat?.stucco ?? 'none',
      bathName: row.bathName,
      isNewest,
      planned: null,
      on: {
        coatId: row.id,
        way: row.way,
        dippedAt: row.dippedAt,
        roughMinutes: row.roughMinutes,
        by: row.by,
        placeName: row.placeName,
        drainSeconds: row.drainSeconds,
        airTempC: row.airTempC,
        relHumidityPct: row.relHumidityPct,
        meanRelHumidityPct: row.meanRelHumidityPct ?? soFar?.meanPct ?? null,
        worstRelHumidityPct: row.worstRelHumidityPct ?? soFar?.worstPct ?? null,
        dryingMs: (row.coveredAt ?? now) - row.dippedAt,
        moistureRatio: row.coveredAt === null ? (isNewest ? (call?.moistureRatio ?? null) : null) : row.moistureRatioAtRedip,
        isCovered: row.coveredAt !== null,
        forecast: { p10At: row.p10At, p50At: row.p50At, p90At: row.p90At },
        deviations: z.array(z.string()).parse(JSON.parse(row.deviations)),
        reason: row.reason,
        evidence: evidence.filter((piece) => piece.coatId === row.id).map(({ coatId: _coatId, ...piece }) => piece),
      },
    }
  })
  return [...planned, ...on]
}

/** From the dip to a little after the safe time; a coat that dried long ago is shown to a little after it was dry. */
function curveOf(derived: DerivedTree, floor: Floor, now: number): TreeDetail['curve'] {
  const { facts, newest, call, belief } = derived
  if (!newest || !call) return null
  const { moistureTarget } = newest
  const start = clockStart(newest)
  const dryAt = call.safeAt ?? call.likelyAt ?? now + 12 * millisecondsInHour
  const until = dryAt + Math.max(millisecondsInHour, (dryAt - start) * 0.15)
  const points = dryingCurve({
    spans: dryingSpans(floor.context, facts.stays, start),
    call,
    start,
    until,
    now,
    moistureTarget,
    pageExponent: belief?.pageExponent ?? undefined,
    count: CURVE_POINTS,
  }).map(({ at, likely, low, high, isForecast }) => ({
    at,
    likelyPct: likely * 100,
    lowPct: low * 100,
    highPct: high * 100,
    isForecast,
  }))
  return { points, targetPct: moistureTarget * 100, likelyAt: call.likelyAt, safeAt: call.safeAt }
}

/** The air while the newest coat dried, of each room that the tree hung in: readings over a short time, hourly means over a long one. */
async function climatePoints(derived: DerivedTree, floor: Floor, now: number): Promise<TreeDetail['climate']> {
  if (!derived.newest) return []
  const from = derived.newest.dippedAt
  const to = Math.min(now, (derived.call?.safeAt ?? now) + 2 * millisecondsInHour)
  const stretches = airAround(floor.context, derived.facts.stays, from, to)
  const points = to - from <= 24 * millisecondsInHour ? await exactPoints(stretches) : hourlyPoints(stretches)
  const step = Math.ceil(points.length / CLIMATE_POINTS) || 1
  return points.filter((_, index) => index % step === 0)
}

async function exactPoints(stretches: readonly AirStretch[]): Promise<TreeDetail['climate']> {
  const readings = await Promise.all(
    stretches.map(async (stretch) => {
      const loaded = await loadReadingsInRange(stretch.climate.sensorId, stretch.from, stretch.to)
      return loaded.filter((reading) => reading.measuredAt >= stretch.from && reading.measuredAt <= stretch.to)
    }),
  )
  return readings.flat().map(({ measuredAt, airTempC, relHumidityPct }) => ({ at: measuredAt, airTempC, relHumidityPct }))
}

function hourlyPoints(stretches: readonly AirStretch[]): TreeDetail['climate'] {
  return stretches.flatMap(({ climate, from, to }) =>
    climate.hours.flatMap(({ hourStart, meanAirTempC, meanRelHumidityPct }) => {
      const at = hourStart + millisecondsInHour / 2
      if (at < from || at >= to || meanAirTempC === null || meanRelHumidityPct === null) return []
      return [{ at, airTempC: meanAirTempC, relHumidityPct: meanRelHumidityPct }]
    }),
  )
}

async function takeBackOf(derived: DerivedTree, viewer: { id: string; role: Role }, now: number): Promise<TreeDetail['takeBack']> {
  const { newest, facts } = derived
  if (!newest || facts.releasedAt !== null || facts.scrappedAt !== null) return null
  const coat = await Coat.findByPk(newest.id)
  if (!coat) return null
  const until = coat.loggedAt + UNDO_MS
  if (coat.loggedBy === viewer.id && now <= until && may(viewer.role, 'undo')) return { coatId: coat.id, kind: 'own', until }
  return may(viewer.role, 'correct') ? { coatId: coat.id, kind: 'with reason', until: null } : null
}
