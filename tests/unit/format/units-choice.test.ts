import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  formatKelvin,
  formatLength,
  formatMass,
  formatTemperature,
  fromSi,
  LENGTH_UNITS,
  MASS_UNITS,
  TEMP_UNITS,
  toSi,
} from '@/lib/format/units'

describe('units', () => {
  // NIST SP 811 (2008), section B.8: factors by definition; 0 °C and 100 °C are 32 °F and 212 °F.
  it('turn at the defined points', () => {
    expect(fromSi(0, 'degF')).toBe(32)
    expect(fromSi(100, 'degF')).toBe(212)
    expect(fromSi(0.45359237, 'lb')).toBe(1)
    expect(fromSi(25.4, 'inch')).toBe(1)
  })

  it('come back as they were typed', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -50, max: 5000, noNaN: true }),
        fc.constantFrom(...TEMP_UNITS, ...MASS_UNITS, ...LENGTH_UNITS),
        (value, unit) => {
          expect(fromSi(toSi(value, unit), unit)).toBeCloseTo(value, 8)
        },
      ),
    )
  })

  it('are written with their sign, and a difference of temperatures without the 32', () => {
    expect(formatTemperature(21.8, 'degF')).toBe('71.2\u00A0°F')
    expect(formatTemperature(21.8)).toBe('21.8\u00A0°C')
    expect(formatKelvin(5, 'degF')).toBe('9.0\u00A0°F')
    expect(formatMass(23.6, 'lb')).toBe('52.0\u00A0lb')
    expect(formatLength(40, 'inch')).toBe('1.6\u00A0in')
    expect(formatLength(40)).toBe('40\u00A0mm')
  })
})
