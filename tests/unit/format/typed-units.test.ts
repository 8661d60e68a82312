import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readTyped, typedText, typedWords } from '@/lib/format/typed-units'

describe('a typed number', () => {
  it('is stored as it is in SI, and rounded far below a dial in other units', () => {
    expect(readTyped(21.123456, 'degC')).toBe(21.123456)
    expect(readTyped(70, 'degF')).toBe(21.11)
    expect(readTyped(5.29, 'lb')).toBe(2.4)
    expect(readTyped(1.5, 'inch')).toBe(38.1)
  })

  it('stands in its field as short as it can be', () => {
    expect(typedText(2.4, 'kg')).toBe('2.4')
    expect(typedText(2.4, 'lb')).toBe('5.29')
    expect(typedText(21.11, 'degF')).toBe('70')
    expect(typedText(-10, 'degF')).toBe('14')
    expect(typedText(38.1, 'inch')).toBe('1.5')
    expect(typedWords(0.35, 'kg')).toBe('0.35\u00A0kg')
    expect(typedWords(3.4, 'lb')).toBe('7.5\u00A0lb')
    expect(typedWords(-10, 'degF')).toBe('14\u00A0°F')
  })

  it('changes nothing when a form is saved as it was opened', () => {
    const cases = [
      ['lb', 1000],
      ['degF', 100],
      ['inch', 10],
    ] as const
    for (const [unit, steps] of cases) {
      fc.assert(
        fc.property(fc.integer({ min: -10 * steps, max: 2000 * steps }), (whole) => {
          const stored = whole / steps
          expect(readTyped(Number(typedText(stored, unit)), unit)).toBe(stored)
        }),
      )
    }
  })

  it('reads back as it was typed, to a tenth of a degree and a hundredth of a pound', () => {
    fc.assert(
      fc.property(fc.integer({ min: 140, max: 1400 }), (tenths) => {
        expect(Number(typedText(readTyped(tenths / 10, 'degF'), 'degF'))).toBeCloseTo(tenths / 10, 1)
      }),
    )
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 110_000 }), (hundredths) => {
        expect(Number(typedText(readTyped(hundredths / 100, 'lb'), 'lb'))).toBe(hundredths / 100)
      }),
    )
  })
})
