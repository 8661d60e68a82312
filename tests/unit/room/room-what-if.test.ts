import { describe, expect, it } from 'vitest'
import { roomFactor } from '@/lib/drying/room-factor'
import { weighAir } from '@/lib/room/room-what-if'
import { roomWhatIf, roomWhatIfAnswer, type RoomWhatIf } from '@/lib/room/room-what-if-contract'
import { harmWords, proposalWords } from '@/lib/room/room-what-if-words'
import {
  buildContext,
  buildDerived,
  buildPlaceFacts,
  buildRoom,
  HOUR,
  MINUTE,
  NOW,
  RECIPE_AIR,
  TIME_ZONE,
  type Air,
  type TreeSpec,
} from './build-room'

const DAMP: Air = { airTempC: 20, relHumidityPct: 75 }
/** Damp and cooler from 18:00 to 07:00 by UTC, the recipe's room by day. */
const dampNight = (at: number): Air => {
  const hour = new Date(at).getUTCHours()
  return hour >= 18 || hour < 7 ? DAMP : RECIPE_AIR
}
const WEEKDAY_FANS = [1, 2, 3, 4, 5].map((weekday) => ({ weekday, onMinute: 420, offMinute: 1080 }))
const plain = (text: string | null) => text?.replaceAll('\u00A0', ' ') ?? null

type Given = {
  airAt?: (at: number) => Air
  trees?: TreeSpec[]
  places?: ReturnType<typeof buildPlaceFacts>[]
  now?: number
  silentHours?: number
  hasHours?: boolean
}

function weigh(choice: Partial<RoomWhatIf>, given: Given = {}) {
  const { airAt = () => RECIPE_AIR, trees = [{}], places = [buildPlaceFacts('Rack')], now = NOW, silentHours = 0, hasHours = true } = given
  const climate = buildRoom(airAt, { now, silentHours })
  const context = buildContext({ climates: [climate], places, now, ...(hasHours ? {} : { calendar: { hours: [], closures: [] } }) })
  const derived = trees.map((spec, index) => buildDerived(context, { tag: `T-${index + 1}`, ...spec }))
  const full: RoomWhatIf = { until: 'opening', ...choice }
  const answer = weighAir({ context, trees: derived, climate, places, hasHours }, full)
  expect(roomWhatIfAnswer.parse(answer)).toEqual(answer)
  const turned = { choice: full, relHumidityNowPct: climate.newest!.relHumidityPct, placeNames: new Map([['Rack', 'Rack']]) }
  return { answer, derived, proposal: plain(proposalWords(turned, answer, { tempUnit: 'degC', timeZone: TIME_ZONE })) }
}

const minutesOf = (at: number | null | undefined) => (at === null || at === undefined ? null : Math.round(at / MINUTE))

describe('dials at the air that comes anyway', () => {
  const fanRack = buildPlaceFacts('Rack', { airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 0.1, fanHours: WEEKDAY_FANS })
  const trees: TreeSpec[] = [{ coat: 1 }, { need: 8 }, { coat: 5, hoursAgo: 6 }, { coat: 2, recessClass: 'deep recess' }]

  it('change nothing where none was turned, whatever the night and the fans', () => {
    const { answer, derived, proposal } = weigh({}, { airAt: dampNight, trees, places: [fanRack] })
    expect(answer.trees).toHaveLength(trees.length)
    for (const tree of answer.trees) {
      const call = derived.find(({ facts }) => facts.tag === tree.tag)!.call!
      expect(tree.before).toEqual({ likelyAt: call.likelyAt, safeAt: call.safeAt })
      expect(tree.after).toEqual(tree.before)
      expect(tree.readyAfter).toBe(tree.readyBefore)
    }
    expect(answer.soonerMs).toBe(0)
    expect(proposal).toBeNull()
  })

  it.each([
    ['temperature and humidity', DAMP],
    ['temperature', { airTempC: DAMP.airTempC }],
    ['humidity', { relHumidityPct: DAMP.relHumidityPct }],
    ['air speed', { airSpeedMps: 1 }],
    ['everything', { ...DAMP, airSpeedMps: 1 }],
  ])('change nothing to the minute: %s', (_what, choice) => {
    const { answer } = weigh(choice, { airAt: () => DAMP, trees })
    for (const tree of answer.trees) {
      expect(minutesOf(tree.after!.likelyAt)).toBe(minutesOf(tree.before!.likelyAt))
      expect(minutesOf(tree.after!.safeAt)).toBe(minutesOf(tree.before!.safeAt))
    }
    expect(answer.beforeOpening.after).toBe(answer.beforeOpening.before)
  })
})

describe('another air', () => {
  it('gives the times of the clock in that air until it ends, and of the forecast behind it', () => {
    // Need 8 since 14:00 in air of 1.0 m/s: 59 minutes at the damp speed, then two hours of the recipe's room until closing.
    const slow = roomFactor(DAMP, 101_325)
    const { answer } = weigh({ ...RECIPE_AIR, until: 'closing' }, { airAt: () => DAMP, trees: [{ need: 8 }] })
    expect(answer.until).toBe(Date.parse('2026-10-13T16:00:00Z'))
    expect((answer.trees[0]!.after!.likelyAt! - NOW) / HOUR).toBeCloseTo(1 + (8 - slow * (59 / 60) - 1) / slow, 2)
    const whole = weigh({ ...RECIPE_AIR }, { airAt: () => DAMP, trees: [{ need: 8 }] }).answer
    expect(whole.until).toBe(Date.parse('2026-10-14T06:00:00Z'))
    expect((whole.trees[0]!.after!.likelyAt! - NOW) / HOUR).toBeCloseTo(8 - slow * (59 / 60), 2)
  })

  it('counts the trees that are ready before closing and before the next opening', () => {
    // Needs from 1 to 16 an hour in, at about half of recipe speed: what is left is likely dry before 17:00 or 07:00, or later.
    const trees = [1.2, 1.3, 1.9, 7, 10, 16].map((need) => ({ need }))
    const { answer, proposal } = weigh({ relHumidityPct: 50 }, { airAt: () => DAMP, trees })
    const slots = (key: 'readyBefore' | 'readyAfter') => answer.trees.map((tree) => tree[key]).join(', ')
    expect(slots('readyBefore')).toBe('opening, opening, opening, opening, later, later')
    expect(slots('readyAfter')).toBe('closing, closing, opening, opening, opening, later')
    expect(answer.beforeClosing).toEqual({ before: 0, after: 2 })
    expect(answer.beforeOpening).toEqual({ before: 4, after: 5 })
    expect(proposal).toBe('Dehumidifier to 50 %: 2 more trees dry before closing (17:00).')
  })

  it('names the opening where nothing more is dry before closing, and the hours where no count grows', () => {
    expect(weigh({ relHumidityPct: 50 }, { airAt: () => DAMP, trees: [{ need: 10 }] }).proposal).toBe(
      'Dehumidifier to 50 %: 1 more tree dry before the next opening (Wed 07:00).',
    )
    expect(weigh({ relHumidityPct: 50, airSpeedMps: 1.2 }, { airAt: () => DAMP, trees: [{ need: 7 }] }).proposal).toMatch(
      /^Dehumidifier to 50 %, 1\.2 m\/s at the trees: \d h.* won, all trees together\.$/,
    )
  })

  it('has no closing while the doors are closed, or where nobody keeps hours', () => {
    const night = weigh({ until: 'closing' }, { now: Date.parse('2026-10-14T01:00:00Z') }).answer
    expect(night).toMatchObject({ closesAt: null, beforeClosing: null, until: Date.parse('2026-10-14T06:00:00Z') })
    expect(weigh({}, { hasHours: false }).answer).toMatchObject({ closesAt: null, opensAt: NOW + 24 * HOUR })
  })

  it('leaves fans on at the places that are named, and nowhere else', () => {
    const fans = { airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 0.1, fanHours: WEEKDAY_FANS }
    const places = [buildPlaceFacts('Rack', fans), buildPlaceFacts('Other', fans)]
    const trees = [{ need: 12 }, { need: 12, placeId: 'Other' }]
    const { answer, proposal } = weigh({ fansOnAt: ['Rack'] }, { places, trees })
    const [rack, other] = ['T-1', 'T-2'].map((tag) => answer.trees.find((tree) => tree.tag === tag)!)
    expect(rack!.after!.likelyAt!).toBeLessThan(rack!.before!.likelyAt! - 2 * HOUR)
    expect(other!.after).toEqual(other!.before)
    expect(proposal).toBe('Fans left on at Rack: 1 more tree dry before the next opening (Wed 07:00).')
  })

  it('leaves fans on for the share of the time that they run', () => {
    const likelyAt = (fanDuty: number) => {
      const fans = { airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 0.1, fanDuty, fanHours: WEEKDAY_FANS }
      return weigh({ fansOnAt: ['Rack'] }, { places: [buildPlaceFacts('Rack', fans)], trees: [{ need: 12 }] }).answer.trees[0]!.after!
        .likelyAt!
    }
    expect(likelyAt(0.3)).toBeGreaterThan(likelyAt(1) + 2 * HOUR)
  })

  it('knows nothing of a room that nobody reads', () => {
    const { answer, proposal } = weigh({ relHumidityPct: 40 }, { silentHours: 5 })
    expect(answer.trees).toMatchObject([{ before: null, after: null, readyBefore: 'not in sight', readyAfter: 'not in sight' }])
    expect(proposal).toBeNull()
  })
})

describe('harm to the wax', () => {
  const codes = (choice: Partial<RoomWhatIf>, given: Given = {}) => weigh(choice, given).answer.harms.map(({ harm }) => harm.code)

  it.each<[string, Partial<RoomWhatIf>, TreeSpec, string[]]>([
    ['a hot room', { airTempC: 27 }, { coat: 3, airTempAtDipC: 26 }, ['heat']],
    ['a room far above coat 1', { airTempC: 24.5 }, { coat: 3 }, ['heat']],
    ['a face coat too far from the room at its dip', { airTempC: 23.6 }, { coat: 1 }, ['swing']],
    ['a cold room', { airTempC: 18.4 }, { coat: 2 }, ['swing']],
    ['a later coat, which no swing lifts', { airTempC: 18 }, { coat: 3 }, []],
    ['a wet bulb far under the air', { airTempC: 23, relHumidityPct: 36 }, { coat: 1 }, ['chill', 'too dry']],
    ['more wind than a face coat bears', { airSpeedMps: 2.5 }, { coat: 1 }, ['too fast']],
    ['under 45 % with a face coat', { airTempC: 19, relHumidityPct: 44 }, { coat: 1 }, ['too dry']],
    ['under 45 % with a later coat', { relHumidityPct: 44 }, { coat: 3 }, []],
  ])('%s', (_what, choice, spec, expected) => {
    expect(codes(choice, { trees: [spec] })).toEqual(expected)
  })

  it('counts shells that are dry already: heat cracks them too, chill and swing do not', () => {
    const trees: TreeSpec[] = [
      { tag: 'T-1', coat: 3 },
      { tag: 'T-2', coat: 2, hoursAgo: 60 },
    ]
    expect(weigh({ airTempC: 27, relHumidityPct: 30 }, { trees }).answer).toMatchObject({
      trees: [{ tag: 'T-1' }],
      harms: [{ harm: { code: 'heat', measure: 'room', value: 27 }, tags: ['T-1', 'T-2'] }],
    })
  })

  it('names the worst of it, since when, and no proposal comes of it, however much it wins', () => {
    const trees: TreeSpec[] = [
      { tag: 'T-1', need: 10 },
      { tag: 'T-2', need: 10 },
      { tag: 'T-3', coat: 1, airTempAtDipC: 20 },
    ]
    const { answer, proposal } = weigh({ airTempC: 28, relHumidityPct: 35 }, { airAt: () => DAMP, trees })
    expect(answer.soonerMs).toBeGreaterThan(10 * HOUR)
    expect(answer.harms.map((shared) => plain(harmWords(shared, 'degC')))).toEqual([
      'Heat, T-1, T-2 and T-3: 28.0 °C, limit 26.0 °C. Wax grows and cracks the shell.',
      'Chill, T-3: the wet bulb lies 10.4 K under the air, limit 10.0 K. The wax shrinks under the coat. More humidity.',
      'Swing, T-3: 8.0 K above the room at the dip, limit 2.5 K. Wax moves under a wet face coat and lifts it.',
      'Too dry, T-3: face coats are not dried under 45 % RH.',
    ])
    expect(answer.harms[0]!.harm.from).toBe(NOW)
    expect(proposal).toBeNull()
  })

  it('measures a swing from the room as it is where nobody knows it at the dip', () => {
    expect(codes({ airTempC: 23.6 }, { trees: [{ coat: 1, airTempAtDipC: null }] })).toEqual(['swing'])
  })
})

describe('what is asked', () => {
  it('is one speed or places, never both', () => {
    expect(roomWhatIf.safeParse({ airSpeedMps: 1, fansOnAt: [] }).error?.issues[0]?.path).toEqual(['fansOnAt'])
    expect(roomWhatIf.parse({})).toEqual({ until: 'opening' })
  })
})
