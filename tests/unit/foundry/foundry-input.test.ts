import { describe, expect, it } from 'vitest'
import { foundryFormValues, foundryInput, readFoundryForm, type FoundryFormValues } from '@/lib/foundry/foundry-input'
import { isTimeZone, timeZones } from '@/lib/foundry/time-zones'
import { fieldErrors } from '@/lib/trees/tree-form-values'

const VALUES: FoundryFormValues = {
  name: 'High Moor',
  timeZone: 'Europe/London',
  altitudeM: '12',
  tempUnit: 'degC',
  massUnit: 'kg',
  lengthUnit: 'mm',
  bandLowTempC: '20',
  bandHighTempC: '23,5',
  bandLowRhPct: '45',
  bandHighRhPct: '58',
}
const complaints = (overrides: Partial<FoundryFormValues>, shown: 'degC' | 'degF' = 'degC') => {
  const parsed = foundryInput(shown).safeParse({ ...VALUES, ...overrides })
  return parsed.success ? {} : fieldErrors(parsed.error)
}

describe('the settings as typed', () => {
  it('leave in °C, whatever unit the form showed', () => {
    expect(foundryInput('degC').parse(VALUES)).toMatchObject({ bandLowTempC: 20, bandHighTempC: 23.5, bandLowRhPct: 45 })
    expect(foundryInput('degF').parse({ ...VALUES, bandLowTempC: '68', bandHighTempC: '73.4' })).toMatchObject({
      bandLowTempC: 20,
      bandHighTempC: 23,
    })
  })

  it('come back unchanged when nobody changed them, in either unit', () => {
    const settings = foundryInput('degC').parse(VALUES)
    for (const shown of ['degC', 'degF'] as const) {
      const input = foundryInput(shown)
      for (let tenths = 180; tenths <= 240; tenths += 1) {
        const stored = { ...settings, bandLowTempC: tenths / 10, bandHighTempC: 45 }
        expect(input.parse(foundryFormValues(stored, shown))).toEqual(stored)
      }
    }
  })

  it.each(['-430', '5000', '−12,5'])('know an altitude of %s m', (altitudeM) => {
    expect(complaints({ altitudeM })).toEqual({})
  })

  it.each(['-430.1', '5001', '', 'high'])('know no altitude of %j m', (altitudeM) => {
    expect(Object.keys(complaints({ altitudeM }))).toEqual(['altitudeM'])
  })

  it('have a band from low to high within what a room can be', () => {
    expect(complaints({ bandHighTempC: '20' })).toEqual({ bandHighTempC: 'The highest temperature is above the lowest.' })
    expect(complaints({ bandHighRhPct: '45' })).toEqual({ bandHighRhPct: 'The highest humidity is above the lowest.' })
    expect(complaints({ bandHighTempC: '46' })).toEqual({ bandHighTempC: 'A shell room is between 0 and 45 °C.' })
    expect(complaints({ bandLowTempC: '31.8', bandHighTempC: '73' }, 'degF')).toEqual({
      bandLowTempC: 'A shell room is between 32 and 113 °F.',
    })
    expect(complaints({ bandHighRhPct: '101' })).toEqual({ bandHighRhPct: 'Humidity is between 0 and 100 %.' })
  })

  it('are read from the form with the unit that it showed', () => {
    const form = new FormData()
    for (const [name, value] of Object.entries(VALUES)) form.set(name, value)
    expect(readFoundryForm(form)).toEqual({ shown: 'degC', values: VALUES })
    form.set('shownTempUnit', 'degF')
    expect(readFoundryForm(form).shown).toBe('degF')
  })
})

describe('time zones', () => {
  it('of the list are all known, and older names with them', () => {
    expect(timeZones().every(isTimeZone)).toBe(true)
    expect(timeZones()).toContain('Europe/Lisbon')
    expect(isTimeZone('US/Pacific')).toBe(true)
  })

  it.each(['', 'Mars/Olympus', '+02:00', 'London'])('know no %j', (name) => {
    expect(isTimeZone(name)).toBe(false)
  })
})
