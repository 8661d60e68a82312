import { describe, expect, it } from 'vitest'
import { readMessage, type MessageForm } from '@/lib/mqtt/read-message'

const form: MessageForm = {
  tempPath: 't',
  rhPath: 'rh',
  pressurePath: null,
  timePath: null,
  batteryPath: null,
  tempUnit: 'degC',
  timeForm: 'arrival',
}
const read = (message: unknown, overrides: Partial<MessageForm> = {}) =>
  readMessage(typeof message === 'string' ? message : JSON.stringify(message), { ...form, ...overrides })
const values = (message: unknown, overrides: Partial<MessageForm> = {}) => {
  const result = read(message, overrides)
  return 'values' in result ? result.values : result.refusal
}

describe('the values of a message', () => {
  it('are read where the paths say, in °C', () => {
    expect(values({ t: 21.4, rh: '52.5' })).toMatchObject({ airTempC: 21.4, relHumidityPct: 52.5, measuredAt: null })
    // 68 °F is 20 °C by definition of the scale.
    expect(values({ t: 68, rh: 50 }, { tempUnit: 'degF' })).toMatchObject({ airTempC: 20 })
    expect(values('21.4', { tempPath: '$', rhPath: null })).toMatchObject({ airTempC: 21.4, relHumidityPct: null })
  })

  it.each<[string, unknown, Partial<MessageForm>]>([
    ['seconds', { t: 1, rh: 1, at: 1_790_000_000 }, { timeForm: 'epoch s' }],
    ['seconds with a fraction', { t: 1, rh: 1, at: 1_790_000_000.0004 }, { timeForm: 'epoch s' }],
    ['milliseconds', { t: 1, rh: 1, at: '1790000000000' }, { timeForm: 'epoch ms' }],
    ['ISO in UTC', { t: 1, rh: 1, at: '2026-09-21T14:13:20Z' }, { timeForm: 'iso' }],
    ['ISO with a zone', { t: 1, rh: 1, at: '2026-09-21T16:13:20.000+02:00' }, { timeForm: 'iso' }],
  ])('tell the time in %s', (_name, message, overrides) => {
    expect(values(message, { timePath: 'at', ...overrides })).toMatchObject({ measuredAt: 1_790_000_000_000 })
  })

  it.each<[string, unknown, Partial<MessageForm>, RegExp]>([
    ['no JSON', 'T=21', {}, /not JSON/],
    ['nothing', ' ', {}, /empty/],
    ['a wrong path', { temp: 21, rh: 50 }, {}, /no temperature at t\. It has temp, rh\./],
    ['no figure', { a: {} }, {}, /no figure in it at all/],
    ['a word for a number', { t: '21 °C', rh: 50 }, {}, /at t is not a number/],
    ['yes for a number', { t: 21, rh: true }, {}, /at rh is not a number/],
    ['a time without its zone', { t: 1, rh: 1, at: '2026-09-21T14:13:20' }, { timePath: 'at', timeForm: 'iso' }, /with its zone/],
    ['a number for an ISO time', { t: 1, rh: 1, at: 1_790_000_000_000 }, { timePath: 'at', timeForm: 'iso' }, /ISO 8601/],
    ['a day for a count', { t: 1, rh: 1, at: 'Monday' }, { timePath: 'at', timeForm: 'epoch s' }, /count since 1970/],
    ['no time', { t: 1, rh: 1 }, { timePath: 'at', timeForm: 'epoch s' }, /no time at at/],
  ])('of %s are refused with the reason', (_name, message, overrides, words) => {
    expect(values(message, overrides)).toMatch(words)
  })

  it.each([100_200, 1002, 100.2])('tell the pressure in Pa, hPa or kPa: %d', (p) => {
    const { pressurePa } = values({ t: 1, rh: 1, p }, { pressurePath: 'p' }) as { pressurePa: number }
    expect(pressurePa).toBeCloseTo(100_200, 6)
  })

  it('are there without the pressure and the battery that cannot be read', () => {
    expect(values({ t: 1, rh: 1, p: 29.6, b: 'low' }, { pressurePath: 'p', batteryPath: 'b' })).toMatchObject({
      pressurePa: null,
      batteryPct: null,
    })
    expect(values({ t: 1, rh: 1, b: 81 }, { batteryPath: 'b' })).toMatchObject({ batteryPct: 81 })
  })
})
