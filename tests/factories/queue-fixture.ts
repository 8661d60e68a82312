import type { CoatKind, Stucco } from '@/lib/coats/vocabulary'
import type { Queue, QueueTree } from '@/lib/queue/contract'
import type { TreeState } from '@/lib/trees/states'

const MINUTE = 60_000
const HOUR = 60 * MINUTE

/** Tue 13 Oct 2026, 15:10 in London. */
export const FIXTURE_NOW = Date.parse('2026-10-13T14:10:00Z')

const id = (kind: number, number: number) => `00000000-0000-4000-8${String(kind).padStart(3, '0')}-${String(number).padStart(12, '0')}`

const FACE_BATH = { id: id(1, 1), name: 'Face slurry' }
const BACKUP_BATH = { id: id(1, 2), name: 'Backup slurry' }

const RECIPE: { kind: CoatKind; stucco: Stucco }[] = [
  { kind: 'face', stucco: 'fine' },
  { kind: 'face', stucco: 'fine' },
  { kind: 'backup', stucco: 'medium' },
  { kind: 'backup', stucco: 'medium' },
  { kind: 'backup', stucco: 'coarse' },
  { kind: 'backup', stucco: 'coarse' },
  { kind: 'backup', stucco: 'coarse' },
  { kind: 'seal', stucco: 'none' },
]

const TITLES = [
  'Lantern Boy',
  'Quay Widow',
  'Swimmer at Rest',
  'Ram’s Fleece',
  'Three Hares',
  'Otter Gate, panel 1',
  'Otter Gate, panel 2',
  'Heron, Standing',
  'Gull on a Post',
  'The Ferryman',
  'Saltmarsh Relief',
  'Kelp Bowl, 2 pieces',
  'Cormorant, Wings Out',
  'The Lighthouse Keeper’s Daughter Waiting for the Herring Fleet, left panel of the triptych',
  'Tide Bell',
  'Hare, Listening',
]

const PLACES = [
  ...['A 1', 'A 2', 'A 3', 'A 4', 'A 5', 'A 6'].map((name) => ({
    name: `Rack ${name}`,
    sensorId: 1,
    needsTypedReading: false,
    fans: null,
  })),
  ...['B 1', 'B 2', 'B 3', 'B 4', 'B 5'].map((name) => ({ name: `Rack ${name}`, sensorId: 1, needsTypedReading: false, fans: null })),
  { name: 'Drying tunnel', sensorId: 2, needsTypedReading: false, fans: null },
  { name: 'Net loft 1', sensorId: 3, needsTypedReading: true, fans: null },
  { name: 'Net loft 2', sensorId: 3, needsTypedReading: true, fans: null },
].map((place, index) => ({ id: id(2, index + 1), ...place }))

function nextCoat(coatsOn: number): QueueTree['next'] {
  const coat = RECIPE[coatsOn]
  if (!coat) return null
  const bath = coat.kind === 'face' ? FACE_BATH : BACKUP_BATH
  return {
    number: coatsOn + 1,
    kind: coat.kind,
    bathId: bath.id,
    bathName: bath.name,
    stucco: coat.stucco,
    drainSeconds: 45,
    isPrewet: false,
    readAloud:
      coat.kind === 'seal'
        ? 'Blow off loose stucco. Seal is slurry only. Drain until it stops.'
        : 'Blow off loose stucco. Brush bubbles. Wipe the rim.',
  }
}

export type TreeFixture = Partial<Omit<QueueTree, 'state' | 'place'>> & {
  state: TreeState
  placeIndex?: number
  /** Minutes from now. */
  likelyIn?: number
  safeIn?: number
  /** Minutes ago. */
  since?: number
}

let count = 0

/** A tree of the queue; a test names only what it is about. */
export function queueTreeFixture({ state, placeIndex, likelyIn, safeIn, since, ...overrides }: TreeFixture, now = FIXTURE_NOW): QueueTree {
  count += 1
  const isOpen = state === 'wet' || state === 'drying' || state === 'nearly dry' || state === 'last coat on' || state === 'unknown'
  const isComplete = state === 'last coat on' || state === 'dried out' || state === 'ready for burnout' || state === 'released'
  const coatsOn = overrides.coatsOn ?? (isComplete ? 8 : state === 'bare wax' || state === 'wax ready' ? 0 : 4)
  const place = PLACES[placeIndex ?? count % PLACES.length] ?? PLACES[0]!
  const dry =
    likelyIn === undefined
      ? null
      : {
          earliestAt: now + (likelyIn - 15) * MINUTE,
          likelyAt: now + likelyIn * MINUTE,
          safeAt: safeIn === undefined ? null : now + safeIn * MINUTE,
        }
  return {
    id: id(3, count),
    tag: `T-${count}`,
    title: TITLES[count % TITLES.length] ?? 'Tide Bell',
    isDemo: false,
    place: { id: place.id, name: place.name },
    state,
    stateSince: since === undefined ? null : now - since * MINUTE,
    coatsOn,
    newestCoat: coatsOn === 0 ? null : { id: id(4, count), number: coatsOn, dippedAt: now - (120 + count) * MINUTE },
    coats: RECIPE,
    openDry: isOpen ? (state === 'wet' ? 0.25 : state === 'nearly dry' ? 0.86 : 0.62) : null,
    openTarget: coatsOn >= 8 ? 0.95 : 0.9,
    moistureRatio: isOpen ? 0.38 : null,
    next: isComplete || state === 'scrapped' ? null : nextCoat(coatsOn),
    guard: coatsOn === 0 ? null : coatsOn <= 2 || coatsOn >= 8 ? 'safe' : 'likely',
    dry,
    driedOut: null,
    isUncalibrated: false,
    pourDate: '2026-10-20',
    willMissPour: false,
    hold: null,
    word: null,
    spots: ['outside'],
    isPlanUncalibrated: false,
    warnings: [],
    ...overrides,
  }
}

const wetWarning = (coat: number, left: number): QueueTree['warnings'] => [
  {
    code: 'still wet',
    level: 'warn',
    text: `Coat ${coat} is still wet: ${left} % of its water left. Dip at 10 % or less. A coat dipped wet can lift off the wax.`,
  },
]

export type QueueFixtureOptions = {
  trees: QueueTree[]
  now?: number
  rooms?: Queue['rooms']
  baths?: Queue['baths']
  overrides?: Partial<Queue>
}

export function queueFixture({ trees, now = FIXTURE_NOW, rooms, baths, overrides = {} }: QueueFixtureOptions): Queue {
  return {
    now,
    foundry: { name: 'Marram Lane Art Foundry', timeZone: 'Europe/London', isDemo: true, hasDemoData: true, isDemoFeedOn: true },
    shift: {
      isOpen: true,
      endsAt: Date.parse('2026-10-13T16:30:00Z'),
      nextStartsAt: Date.parse('2026-10-14T06:30:00Z'),
      nextEndsAt: Date.parse('2026-10-14T10:00:00Z'),
    },
    rooms: rooms ?? [roomFixture({ measuredAt: now - 2 * MINUTE })],
    baths: baths ?? [
      { ...FACE_BATH, kind: 'face', stirredAt: now - 7.5 * HOUR, stirredBy: 'Maud', isStirredToday: true },
      { ...BACKUP_BATH, kind: 'backup', stirredAt: null, stirredBy: null, isStirredToday: false },
    ],
    places: PLACES,
    worker: { pulseAt: now - 20_000, isAlive: true },
    trees,
    ...overrides,
  }
}

export function roomFixture(overrides: Partial<Queue['rooms'][number]> = {}): Queue['rooms'][number] {
  return {
    sensorId: 1,
    sensorName: 'Shell room',
    airTempC: 21.8,
    relHumidityPct: 58,
    wetBulbGapK: 5.4,
    speedPct: 84,
    pull: 'slow',
    measuredAt: FIXTURE_NOW - 2 * MINUTE,
    source: 'sensor',
    isStale: false,
    isTypedOnly: false,
    ...overrides,
  }
}

/** The afternoon of the pictures: 19 trees, every group small. */
export function afternoonFixture(now = FIXTURE_NOW): Queue {
  const tree = (tag: string, title: string, placeIndex: number, fixture: Omit<TreeFixture, 'placeIndex'>) =>
    queueTreeFixture({ ...fixture, tag, title, placeIndex }, now)
  return queueFixture({
    now,
    trees: [
      tree('T-124', 'Lantern Boy', 2, { state: 'waiting', coatsOn: 1, since: 18 }),
      tree('T-126', 'Quay Widow', 3, { state: 'wax ready' }),
      tree('T-118', 'Swimmer at Rest', 7, { state: 'waiting', coatsOn: 5, since: 70 }),
      tree('T-120', 'Ram’s Fleece', 8, { state: 'waiting', coatsOn: 4, since: 35 }),
      tree('T-121', 'Three Hares', 9, { state: 'waiting', coatsOn: 4, since: 20 }),
      tree('T-119', 'Otter Gate, panel 1', 6, {
        state: 'nearly dry',
        coatsOn: 6,
        likelyIn: 25,
        safeIn: 70,
        openDry: 0.88,
        warnings: wetWarning(6, 12),
      }),
      tree('T-122', 'Otter Gate, panel 2', 10, {
        state: 'drying',
        coatsOn: 5,
        likelyIn: 70,
        safeIn: 120,
        openDry: 0.83,
        warnings: wetWarning(5, 17),
      }),
      tree('T-125', 'Heron, Standing', 4, {
        state: 'drying',
        coatsOn: 2,
        likelyIn: 110,
        safeIn: 140,
        openDry: 0.62,
        warnings: wetWarning(2, 38),
      }),
      tree('T-127', 'Gull on a Post', 5, {
        state: 'wet',
        coatsOn: 1,
        likelyIn: 160,
        safeIn: 185,
        openDry: 0.3,
        warnings: wetWarning(1, 70),
      }),
      tree('T-116', 'The Ferryman', 13, {
        state: 'drying',
        coatsOn: 7,
        likelyIn: 335,
        safeIn: 435,
        openDry: 0.55,
        warnings: wetWarning(7, 45),
      }),
      tree('T-123', 'Saltmarsh Relief', 11, {
        state: 'wet',
        coatsOn: 4,
        likelyIn: 695,
        safeIn: 815,
        openDry: 0.2,
        warnings: wetWarning(4, 80),
      }),
      tree('T-117', 'Cormorant, Wings Out', 0, { state: 'last coat on', likelyIn: 480, safeIn: 665, openDry: 0.7 }),
      tree('T-115', 'Otter Gate, panel 3', 1, { state: 'last coat on', likelyIn: 845, safeIn: 995, openDry: 0.4 }),
      tree('T-113', 'Lifeboat Crew, relief', 1, { state: 'dried out' }),
      ...['T-108', 'T-109', 'T-111', 'T-112'].map((tag) => tree(tag, 'Tide Bell', 0, { state: 'ready for burnout' })),
      tree('T-114', 'The Netmender', 4, {
        state: 'held',
        coatsOn: 3,
        hold: { id: id(5, 1), reason: 'Crack at the cup. Patch, then ask Ines.', by: 'Ines', at: now - 3 * HOUR },
        warnings: [{ code: 'held', level: 'stop', text: 'Held by Ines: Crack at the cup. Patch, then ask Ines.' }],
      }),
    ],
  })
}

const MIX: ((n: number) => TreeFixture)[] = [
  (n) => ({ state: 'waiting', coatsOn: 1 + (n % 7), since: 5 + n * 3 }),
  (n) => ({ state: 'drying', coatsOn: 1 + (n % 7), likelyIn: 40 + n * 17, safeIn: 75 + n * 20, warnings: wetWarning(1 + (n % 7), 38) }),
  (n) => ({ state: 'wet', coatsOn: 1 + (n % 7), likelyIn: 130 + n * 31, safeIn: 190 + n * 40, warnings: wetWarning(1 + (n % 7), 80) }),
  () => ({ state: 'wax ready' }),
  (n) => ({ state: 'last coat on', likelyIn: 300 + n * 13, safeIn: 420 + n * 17 }),
  (n) => ({ state: 'waiting', coatsOn: 2 + (n % 6), since: 90 + n }),
  () => ({ state: 'ready for burnout' }),
  (n) => ({ state: 'overdue', coatsOn: 1 + (n % 5), since: 60 + n * 5 }),
  (n) => ({ state: 'nearly dry', coatsOn: 1 + (n % 6), likelyIn: 8 + (n % 20), safeIn: 45 + n, warnings: wetWarning(1 + (n % 6), 13) }),
  () => ({ state: 'dried out' }),
  (n) => ({
    state: 'unknown',
    coatsOn: 3,
    placeIndex: 12 + (n % 2),
    warnings: [
      {
        code: 'unknown',
        level: 'warn',
        text: 'No reading tells how the air was: confirm by touch, weight or temperature before the next act.',
      },
    ],
  }),
  () => ({ state: 'bare wax' }),
  (n) => ({ state: 'waiting', coatsOn: 4 + (n % 3), since: 15 + n }),
  (n) => ({
    state: 'held',
    coatsOn: 3,
    hold: {
      id: id(5, n + 2),
      reason: 'Core shifted at the left foot, wait for the pattern shop to answer',
      by: 'Ines',
      at: FIXTURE_NOW - n * HOUR,
    },
    warnings: [{ code: 'held', level: 'stop', text: 'Held by Ines: Core shifted at the left foot, wait for the pattern shop to answer' }],
  }),
  (n) => ({ state: 'drying', coatsOn: 2 + (n % 5), likelyIn: 2000 + n * 60, safeIn: 2600 + n * 70, warnings: wetWarning(3, 60) }),
]

/** A floor of any size with every state, long tags and long titles. */
export function crowdFixture(trees: number, now = FIXTURE_NOW): Queue {
  return queueFixture({
    now,
    trees: Array.from({ length: trees }, (_, index) => {
      const make = MIX[index % MIX.length]!
      return queueTreeFixture(
        { tag: index % 11 === 7 ? `ABC-${12000 + index}` : `T-${130 + index}`, ...make(Math.floor(index / MIX.length)) },
        now,
      )
    }),
    rooms: [
      roomFixture({ measuredAt: now - 2 * MINUTE }),
      roomFixture({
        sensorId: 2,
        sensorName: 'Drying tunnel',
        airTempC: 24,
        relHumidityPct: 41,
        pull: 'too dry for face coats',
        wetBulbGapK: 8.6,
        speedPct: 142,
        measuredAt: now - 4 * MINUTE,
      }),
      roomFixture({
        sensorId: 3,
        sensorName: 'Net loft',
        isTypedOnly: true,
        source: 'typed',
        isStale: true,
        pull: 'not known',
        measuredAt: now - 14 * HOUR,
      }),
    ],
  })
}
