import { fromSi, toSi, UNIT_SIGNS, type LengthUnit, type MassUnit, type TempUnit } from '@/lib/format/units'

type Unit = TempUnit | MassUnit | LengthUnit

/** What a converted number is stored to, decimals in °C, kg or mm: finer than anybody weighs or reads. */
const DECIMALS: Partial<Record<Unit, number>> = { degF: 2, lb: 3, inch: 1 }

const roundTo = (value: number, decimals: number) => Math.round(value * 10 ** decimals) / 10 ** decimals

/**
 * A typed number as it is stored. SI units come through untouched; others are rounded far below what a dial or a scale shows, so
 * that 70 °F is not kept as 21.11111111111111 °C.
 *
 * @example readTyped(70, 'degF') // => 21.11
 */
export function readTyped(value: number, unit: Unit): number {
  const decimals = DECIMALS[unit]
  return decimals === undefined ? value : roundTo(toSi(value, unit), decimals)
}

/**
 * A stored number as it stands in a field: the shortest text that reads back as the same number, so that saving a form in which
 * nothing was touched changes nothing.
 *
 * @example typedText(2.4, 'lb') // => '5.29'
 * @example typedText(2.4, 'kg') // => '2.4'
 */
export function typedText(si: number, unit: Unit): string {
  const kept = DECIMALS[unit]
  if (kept === undefined) return String(si)
  const shown = fromSi(si, unit)
  const texts = Array.from({ length: kept + 2 }, (_, decimals) => String(roundTo(shown, decimals)))
  return texts.find((text) => readTyped(Number(text), unit) === roundTo(si, kept)) ?? String(shown)
}

/**
 * A stored number with its unit: for facts and limits that a person has typed. As exact as it was in SI, to two decimals in other units.
 *
 * @example typedWords(0.35, 'kg') // => '0.35 kg'
 * @example typedWords(3.4, 'lb') // => '7.5 lb'
 */
export function typedWords(si: number, unit: Unit): string {
  const shown = DECIMALS[unit] === undefined ? si : roundTo(fromSi(si, unit), 2)
  return `${shown}\u00A0${UNIT_SIGNS[unit]}`
}
