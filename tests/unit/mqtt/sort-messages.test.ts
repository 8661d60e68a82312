import { describe, expect, it } from 'vitest'
import { messageSorter, type Arrival, type TopicRule } from '@/lib/mqtt/sort-messages'

const NOW = Date.parse('2026-10-13T09:00:04Z')
const whole: TopicRule = {
  filter: 'shop/air',
  sensorId: 1,
  sensorName: 'Loft',
  tempPath: 't',
  rhPath: 'rh',
  pressurePath: null,
  timePath: null,
  batteryPath: null,
  tempUnit: 'degC',
  timeForm: 'arrival',
}
const timed: TopicRule = { ...whole, timePath: 'at', timeForm: 'epoch ms' }
const halves: TopicRule[] = [
  { ...whole, filter: 'shop/t', tempPath: '$', rhPath: null },
  { ...whole, filter: 'shop/rh', tempPath: null, rhPath: '$' },
]
const arrival = (text: string, overrides: Partial<Arrival> = {}): Arrival => ({
  topic: 'shop/air',
  text,
  sizeBytes: text.length,
  sha256: text,
  arrivedAt: NOW,
  isRetained: false,
  isHeldBack: false,
  isSentAgain: false,
  ...overrides,
})
const AIR = '{"t":21,"rh":50}'

describe('a message without a time', () => {
  it('counts from its arrival, to the full ten seconds', () => {
    expect(messageSorter().sort(arrival(AIR), [whole])).toMatchObject({
      outcome: 'taken',
      rows: [{ sensorId: 1, row: { measuredAt: Date.parse('2026-10-13T09:00:00Z'), airTempC: 21, relHumidityPct: 50 } }],
    })
  })

  it('that comes twice at once is one, whichever filter brought it', () => {
    const sorter = messageSorter()
    const other = { ...whole, filter: 'shop/+', sensorId: 2, sensorName: 'Porch' }
    expect(sorter.sort(arrival(AIR), [whole, other])?.rows.map(({ sensorId }) => sensorId)).toEqual([1, 2])
    expect(sorter.sort(arrival(AIR, { arrivedAt: NOW + 1500 }), [whole, other])).toMatchObject({ outcome: 'repeated', rows: [] })
    // Still air says the same for hours.
    expect(sorter.sort(arrival(AIR, { arrivedAt: NOW + 60_000 }), [whole])).toMatchObject({ outcome: 'taken' })
  })

  it('that the broker sends again is known for a quarter of an hour, also among others', () => {
    const sorter = messageSorter()
    sorter.sort(arrival(AIR), [whole])
    sorter.sort(arrival('{"t":22,"rh":50}', { arrivedAt: NOW + 10_000 }), [whole])
    const again = (minutes: number) => sorter.sort(arrival(AIR, { arrivedAt: NOW + minutes * 60_000, isSentAgain: true }), [whole])?.outcome
    expect(again(5)).toBe('repeated')
    // Its first try never came here.
    const lost = arrival('{"t":23,"rh":50}', { isSentAgain: true })
    expect(sorter.sort(lost, [whole])?.outcome).toBe('taken')
    const later = messageSorter()
    later.note({ topic: 'shop/air', sha256: AIR, arrivedAt: NOW })
    expect(later.sort(arrival(AIR, { arrivedAt: NOW + 14 * 60_000, isSentAgain: true }), [whole])?.outcome).toBe('repeated')
    const fresh = messageSorter()
    fresh.note({ topic: 'shop/air', sha256: AIR, arrivedAt: NOW })
    expect(fresh.sort(arrival(AIR, { arrivedAt: NOW + 16 * 60_000, isSentAgain: true }), [whole])?.outcome).toBe('taken')
  })

  it.each([{ isRetained: true }, { isHeldBack: true }])('of unknown age is passed over: %j', (flags) => {
    expect(messageSorter().sort(arrival(AIR, flags), [whole])).toMatchObject({ outcome: 'passed over', rows: [] })
    const text = JSON.stringify({ t: 21, rh: 50, at: NOW - 60_000 })
    expect(messageSorter().sort(arrival(text, flags), [timed])).toMatchObject({ outcome: 'taken' })
  })
})

describe('temperature and humidity on topics of their own', () => {
  const half = (topic: string, text: string, seconds: number, sorter: ReturnType<typeof messageSorter>, isSentAgain = false) =>
    sorter.sort(arrival(text, { topic, arrivedAt: NOW + seconds * 1000, isSentAgain }), halves)

  it('make a reading when both are there, each counting once', () => {
    const sorter = messageSorter()
    expect(half('shop/t', '21', 0, sorter)).toMatchObject({ outcome: 'waiting', reason: expect.stringContaining('humidity') })
    expect(half('shop/rh', '50', 20, sorter)?.rows).toMatchObject([{ row: { airTempC: 21, relHumidityPct: 50 } }])
    expect(half('shop/rh', '51', 60, sorter)?.outcome).toBe('waiting')
    expect(half('shop/t', '22', 90, sorter)?.rows).toMatchObject([{ row: { airTempC: 22, relHumidityPct: 51 } }])
  })

  it('do not when they are more than two minutes apart', () => {
    const sorter = messageSorter()
    half('shop/t', '21', 0, sorter)
    expect(half('shop/rh', '50', 131, sorter)?.outcome).toBe('waiting')
    expect(half('shop/t', '23', 140, sorter)?.rows).toMatchObject([{ row: { airTempC: 23, relHumidityPct: 50 } }])
  })

  it('one that is sent again is not laid to the next other half', () => {
    const sorter = messageSorter()
    half('shop/t', '21', 0, sorter)
    half('shop/rh', '50', 1, sorter)
    expect(half('shop/t', '21', 30, sorter, true)?.outcome).toBe('repeated')
    expect(half('shop/rh', '51', 60, sorter)?.outcome).toBe('waiting')
  })
})

describe('what cannot be', () => {
  it.each<[string, string, TopicRule, RegExp]>([
    ['ahead of the clock', JSON.stringify({ t: 21, rh: 50, at: NOW + 121_000 }), timed, /^Its time lies more than 2 min ahead/],
    ['too old', JSON.stringify({ t: 21, rh: 50, at: NOW - 32 * 86_400_000 }), timed, /31 days/],
    ['a picture', 'x'.repeat(20_000), whole, /20000 bytes/],
  ])('%s is refused', (_name, text, rule, words) => {
    expect(messageSorter().sort(arrival(text), [rule])).toMatchObject({
      outcome: 'refused',
      reason: expect.stringMatching(words),
      rows: [],
    })
  })

  it('for one sensor is said with its name, and the other sensor has its reading', () => {
    const wrong = { ...whole, sensorId: 2, sensorName: 'Porch', tempPath: 'x' }
    expect(messageSorter().sort(arrival(AIR), [whole, wrong])).toMatchObject({
      outcome: 'refused',
      reason: expect.stringMatching(/^Porch: There is no temperature at x/),
      rows: [{ sensorId: 1 }],
    })
  })

  it('a topic that nobody asked for is nothing', () => {
    expect(messageSorter().sort(arrival(AIR, { topic: 'shop/door' }), [whole])).toBeNull()
  })
})
