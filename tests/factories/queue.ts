import type { Queue, QueueRoom, QueueTree } from '@/lib/queue/contract'

const MINUTE_MS = 60_000

/** A Tuesday in October, 14:00 in London. */
export const NOW = Date.UTC(2026, 9, 13, 13, 0)

export const PLACE_ID = '00000000-0000-7000-8000-0000000000a1'
export const BATH_ID = '00000000-0000-7000-8000-0000000000b1'

/** A UUID for the n-th thing of a sort: readable in a failed test. */
export const testId = (sort: number, n: number): string =>
  `00000000-0000-7000-8000-${String(sort).padStart(4, '0')}${String(n).padStart(8, '0')}`

/** A tree with five coats on, drying in Rack B. */
export function buildQueueTree(overrides: Partial<QueueTree> = {}): QueueTree {
  return {
    id: testId(1, 122),
    tag: 'T-122',
    title: 'Otter Gate, panel 2',
    isDemo: false,
    place: { id: PLACE_ID, name: 'Rack B' },
    state: 'drying',
    stateSince: null,
    coatsOn: 5,
    newestCoat: { id: testId(2, 5), number: 5, dippedAt: NOW - 300 * MINUTE_MS },
    coats: [],
    openDry: 0.6,
    openTarget: 0.9,
    moistureRatio: 0.4,
    next: {
      number: 6,
      kind: 'backup',
      bathId: BATH_ID,
      bathName: 'Backup slurry',
      stucco: 'coarse',
      drainSeconds: 45,
      isPrewet: false,
      readAloud: 'Blow off loose stucco.',
    },
    guard: 'safe',
    dry: { earliestAt: null, likelyAt: NOW + 60 * MINUTE_MS, safeAt: NOW + 110 * MINUTE_MS },
    driedOut: null,
    isUncalibrated: false,
    pourDate: null,
    willMissPour: false,
    hold: null,
    word: null,
    spots: ['outside'],
    isPlanUncalibrated: false,
    warnings: [],
    ...overrides,
  }
}

/** The same tree with its guard reached `minutesAgo`. */
export function buildDryTree(minutesAgo = 5, overrides: Partial<QueueTree> = {}): QueueTree {
  const safeAt = NOW - minutesAgo * MINUTE_MS
  return buildQueueTree({
    state: 'dip now',
    stateSince: safeAt,
    dry: { earliestAt: null, likelyAt: safeAt - 50 * MINUTE_MS, safeAt },
    ...overrides,
  })
}

export function buildQueueRoom(overrides: Partial<QueueRoom> = {}): QueueRoom {
  return {
    sensorId: 1,
    sensorName: 'Shell room logger',
    airTempC: 21,
    relHumidityPct: 55,
    wetBulbGapK: 5,
    speedPct: 80,
    pull: 'good',
    measuredAt: NOW - MINUTE_MS,
    source: 'sensor',
    isStale: false,
    isTypedOnly: false,
    ...overrides,
  }
}

export function buildQueue(overrides: Partial<Queue> = {}): Queue {
  return {
    now: NOW,
    foundry: { name: 'Marram Lane', timeZone: 'Europe/London', isDemo: false, hasDemoData: false, isDemoFeedOn: false },
    shift: { isOpen: true, endsAt: NOW + 180 * MINUTE_MS, nextStartsAt: NOW + 1080 * MINUTE_MS, nextEndsAt: NOW + 1620 * MINUTE_MS },
    rooms: [buildQueueRoom()],
    baths: [],
    places: [{ id: PLACE_ID, name: 'Rack B', sensorId: 1, needsTypedReading: false, fans: null }],
    worker: { pulseAt: NOW, isAlive: true },
    trees: [],
    ...overrides,
  }
}
