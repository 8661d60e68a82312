import type { CoatKind, Guard, RecessClass, Stucco } from '@/lib/coats/vocabulary'
import { recordReadings } from '@/lib/commands/record-readings'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import type { Role } from '@/lib/members/roles'
import {
  Bath,
  Foundry,
  Member,
  Piece,
  Place,
  Recipe,
  RecipeCoat,
  RecipeVersion,
  Section,
  Sensor,
  ShiftHours,
  Tree,
  TreePiece,
  TreePlace,
  Work,
} from '@/models'

let count = 0
const next = () => (count += 1)

/** Tuesday 13 October 2026, 10:00 in London. */
export const NOW = Date.parse('2026-10-13T09:00:00Z')
export const HOUR = 3_600_000
export const MINUTE = 60_000

/** A clock that stands still until it is moved. */
export function stoppedClock(at = NOW) {
  const clock = { at, now: () => clock.at, advance: (ms: number) => (clock.at += ms) }
  return clock
}

/** The parts of a valid password hash; nobody can sign in with it. */
const NO_PASSWORD = 'scrypt$1024$8$1$AAAA$AAAA'

export async function buildMember(role: Role = 'operator', name = `Member ${next()}`): Promise<Actor> {
  const id = newId()
  await Member.create({ id, name, email: `m${next()}@example.com`, role, passwordHash: NO_PASSWORD, createdAt: NOW })
  return { id, name, role }
}

/** A foundry at sea level with one sensor, one place in 1.0 m/s air day and night, and two baths. */
export async function buildFoundry({ timeZone = 'Europe/London' } = {}) {
  await Foundry.create({ id: 1, name: 'Test foundry', timeZone, altitudeM: 0, isDemo: false, setUpAt: NOW, createdAt: NOW })
  await ShiftHours.bulkCreate([1, 2, 3, 4, 5].map((weekday) => ({ weekday, opensMinute: 420, closesMinute: 1020 })))
  const sensor = await Sensor.create({ name: 'Shell room', kind: 'logger', createdAt: NOW })
  const place = await buildPlace({ sensorId: sensor.id })
  const face = await Bath.create({ id: newId(), name: 'Face slurry', kind: 'face', createdAt: NOW })
  const backup = await Bath.create({ id: newId(), name: 'Backup slurry', kind: 'backup', createdAt: NOW })
  return { sensorId: sensor.id, placeId: place.id, faceBathId: face.id, backupBathId: backup.id }
}
export type TestFoundry = Awaited<ReturnType<typeof buildFoundry>>

/** One air speed, unless the fans make a difference. */
export function buildPlace(overrides: Partial<{ sensorId: number; name: string; airSpeedMps: number; airSpeedFansOffMps: number }> = {}) {
  const speed = overrides.airSpeedMps ?? 1
  return Place.create({
    id: newId(),
    name: overrides.name ?? `Rack ${next()}`,
    airSpeedFansOnMps: speed,
    airSpeedFansOffMps: overrides.airSpeedFansOffMps ?? speed,
    sensorId: overrides.sensorId ?? 1,
    createdAt: NOW,
  })
}

type CoatSpec = { kind: CoatKind; stucco: Stucco; need?: number; guard?: Guard; target?: number; longestWaitHours?: number }

const FOUR_COATS: CoatSpec[] = [
  { kind: 'face', stucco: 'fine', need: 2.5 },
  { kind: 'backup', stucco: 'medium', need: 4 },
  { kind: 'backup', stucco: 'coarse', need: 4.16 },
  { kind: 'seal', stucco: 'none', need: 12, target: 0.05 },
]

export async function buildRecipe(foundry: TestFoundry, coats: CoatSpec[] = FOUR_COATS): Promise<string> {
  const recipe = await Recipe.create({ id: newId(), name: `Recipe ${next()}`, createdAt: NOW })
  const version = await RecipeVersion.create({ id: newId(), recipeId: recipe.id, version: 1, createdAt: NOW })
  await RecipeCoat.bulkCreate(
    coats.map((coat, index) => ({
      recipeVersionId: version.id,
      number: index + 1,
      kind: coat.kind,
      bathId: coat.kind === 'face' ? foundry.faceBathId : foundry.backupBathId,
      stucco: coat.stucco,
      needReferenceHours: coat.need ?? 4,
      moistureTarget: coat.target ?? 0.1,
      guard: coat.guard ?? 'likely',
      drainSeconds: 60,
      longestWaitHours: coat.longestWaitHours ?? (coat.kind === 'face' ? 24 : 72),
      isPrewet: index > 0,
      readAloud: 'Blow off loose stucco.',
    })),
  )
  return version.id
}

type TreeOverrides = Partial<{
  recipeVersionId: string
  recessClass: RecessClass
  /** Null leaves the intake open. */
  intakePassedAt: number | null
  pourDate: string
  since: number
  placeId: string
}>

export async function buildTree(foundry: TestFoundry, overrides: TreeOverrides = {}): Promise<Tree> {
  const recipeVersionId = overrides.recipeVersionId ?? (await buildRecipe(foundry))
  const since = overrides.since ?? NOW - 10 * 24 * HOUR
  const passed = {
    waxSurface: 'washed',
    isWaxAtRoomTemp: true,
    isCupFirm: true,
    areVentsAndCorePinsIn: true,
    intakePassedAt: overrides.intakePassedAt ?? since,
  } as const
  const tree = await Tree.create({
    id: newId(),
    tag: `T-${100 + next()}`,
    recipeVersionId,
    waxMassKg: 2.4,
    cupKind: 'wax',
    cupVolumeL: 0.3,
    recessClass: overrides.recessClass ?? 'none',
    spacing: 'open',
    pourDate: overrides.pourDate ?? null,
    ...(overrides.intakePassedAt === null ? {} : passed),
    createdAt: since,
    updatedAt: since,
  })
  await TreePlace.create({ id: newId(), treeId: tree.id, placeId: overrides.placeId ?? foundry.placeId, since })
  const work = await Work.create({ id: newId(), title: `Work ${next()}`, createdAt: NOW })
  const section = await Section.create({ id: newId(), workId: work.id, name: '' })
  const piece = await Piece.create({ id: newId(), sectionId: section.id, editionNumber: 1, createdAt: NOW })
  await TreePiece.create({ treeId: tree.id, pieceId: piece.id })
  return tree
}

/**
 * Steady air of a sensor between two instants, a reading every five minutes; 21 °C and 50 % is one reference hour an hour. As with any
 * real one its last digit moves: one that stands still is taken to be stuck.
 */
export function buildAir(sensorId: number, from: number, to: number, air = { airTempC: 21, relHumidityPct: 50 }) {
  const rows = []
  for (let measuredAt = from; measuredAt <= to; measuredAt += 5 * MINUTE) {
    const last = Math.floor(measuredAt / (5 * MINUTE)) % 2 === 0 ? 0 : 1e-7
    rows.push({ measuredAt, ...air, relHumidityPct: air.relHumidityPct - last })
  }
  return recordReadings({ sensorId, source: 'sensor', enteredBy: null, rows }, { clock: { now: () => to } })
}

type DippedTree = { treeId: string; coatNumber: number; placeId?: string; reason?: string }
type DipOverrides = Partial<{
  operationId: string
  bathId: string
  stucco: Stucco
  dippedAt: number
  drainSeconds: number
  roughTime: number
  room: { airTempC: number; relHumidityPct: number }
}>

/** A dip run as a tablet sends it: fine stucco in the face bath, now, unless told otherwise. */
export function dipBody(foundry: TestFoundry, trees: DippedTree[], overrides: DipOverrides = {}) {
  return {
    operationId: newId(),
    bathId: foundry.faceBathId,
    stucco: 'fine' as Stucco,
    way: 'dip' as const,
    drainSeconds: 60,
    dippedAt: NOW,
    ...overrides,
    trees: trees.map((tree) => ({ placeId: foundry.placeId, ...tree })),
  }
}
