import { describe, expect, it } from 'vitest'
import { deviceForm, offsetForm } from '@/lib/room/sensor-forms'
import { correctedAir, offsetAt, offsetWords } from '@/lib/room/sensor-offsets'
import { sensorWarnings, type SensorState } from '@/lib/room/sensor-warnings'
import { windowsAround } from '@/lib/room/windows'

const NOW = Date.parse('2026-10-13T09:00:00Z')
const MINUTE = 60_000

describe('an offset', () => {
  it('is added to both values, and what counts stays within what air can be', () => {
    const offset = { since: 0, airTempOffsetK: -0.4, relHumidityOffsetPct: 3 }
    expect(correctedAir({ airTempC: 21.4, relHumidityPct: 52 }, offset)).toEqual({ airTempC: 21, relHumidityPct: 55 })
    expect(correctedAir({ airTempC: -9.9, relHumidityPct: 99 }, offset)).toEqual({ airTempC: -10, relHumidityPct: 100 })
    expect(correctedAir({ airTempC: 20, relHumidityPct: 2 }, { ...offset, relHumidityOffsetPct: -5 }).relHumidityPct).toBe(0.5)
    // What is not corrected is left as it is, damp sensors' 103 % too.
    expect(correctedAir({ airTempC: 20, relHumidityPct: 103 }, null)).toEqual({ airTempC: 20, relHumidityPct: 103 })
  })

  it('counts from its instant on, until the next one', () => {
    const offsets = [200, 100].map((since) => ({ since, airTempOffsetK: since / 100, relHumidityOffsetPct: 0 }))
    expect([99, 100, 199, 200, 900].map((at) => offsetAt(offsets, at)?.airTempOffsetK ?? null)).toEqual([null, 1, 1, 2, 2])
  })

  it('is typed as a difference: 0.9 °F is half a kelvin', () => {
    const typed = { since: '', airTempOffsetK: '−0,9', relHumidityOffsetPct: '3', note: ' salt jar ' }
    expect(offsetForm('degF', 'Europe/London').parse(typed)).toEqual({ airTempOffsetK: -0.5, relHumidityOffsetPct: 3, note: 'salt jar' })
    expect(offsetForm('degC', 'Europe/London').safeParse({ ...typed, airTempOffsetK: '10.1' }).success).toBe(false)
    expect(offsetForm('degC', 'Europe/London').safeParse({ ...typed, relHumidityOffsetPct: '31' }).success).toBe(false)
    expect(offsetWords({ airTempOffsetK: -0.5, relHumidityOffsetPct: 3 }, 'degF')).toBe('−0.9\u00A0°F, +3\u00A0points RH')
    expect(offsetWords({ airTempOffsetK: 0, relHumidityOffsetPct: 0 })).toBe('nothing')
  })

  it('counts from a time by the clock of the foundry', () => {
    const form = deviceForm('America/Denver')
    expect(form.parse({ since: '2026-10-13T03:00', serial: 'A1', note: '' }).since).toBe(NOW)
    expect(form.safeParse({ since: 'yesterday', serial: '', note: '' }).success).toBe(false)
  })
})

describe('what is to be looked at with a sensor', () => {
  const well: SensorState = {
    kind: 'logger',
    newestAt: NOW - 30 * MINUTE,
    placeCount: 2,
    batteryPct: 16,
    clockOffsetSeconds: null,
    markedCount: 0,
  }
  const warnings = (state: Partial<SensorState>) => sensorWarnings({ ...well, ...state }, { now: NOW, timeZone: 'Europe/London' })

  it('is nothing where all is well', () => {
    expect(warnings({})).toEqual([])
    expect(warnings({ kind: 'wall hygrometer', newestAt: NOW - 12 * 60 * MINUTE })).toEqual([])
    expect(warnings({ placeCount: 0, newestAt: 1 })).toEqual([])
  })

  it.each<[Partial<SensorState>, string]>([
    [{ newestAt: NOW - 31 * MINUTE }, 'since 09:29'],
    [{ kind: 'wall hygrometer', newestAt: NOW - 13 * 60 * MINUTE }, 'since Mon 21:00'],
    [{ batteryPct: 15 }, 'Battery 15\u00A0%: change it.'],
    [{ clockOffsetSeconds: 419 }, 'Its clock is 7\u00A0min fast'],
    [{ clockOffsetSeconds: -3600 }, 'Its clock is 1\u00A0h slow'],
    [{ markedCount: 3 }, 'in the last 24 h: 3.'],
  ])('names %j', (state, words) => {
    expect(warnings(state)).toEqual([expect.stringContaining(words)])
  })
})

describe('the stretches around instants', () => {
  it('are joined where they meet, and leave out what lies between', () => {
    expect(windowsAround([300, 100, 105], { before: 10, after: 20 })).toEqual([
      { from: 90, to: 125 },
      { from: 290, to: 320 },
    ])
    expect(windowsAround([], { before: 1, after: 1 })).toEqual([])
  })
})
