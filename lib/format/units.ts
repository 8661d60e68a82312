const NO_BREAK = '\u00A0'
const NONE = '–'

export const TEMP_UNITS = ['degC', 'degF'] as const
export type TempUnit = (typeof TEMP_UNITS)[number]
export const MASS_UNITS = ['kg', 'lb'] as const
export type MassUnit = (typeof MASS_UNITS)[number]
export const LENGTH_UNITS = ['mm', 'inch'] as const
export type LengthUnit = (typeof LENGTH_UNITS)[number]

/** The units in which somebody reads and types. Everything is stored in °C, kg, mm and m. */
export type Units = { temp: TempUnit; mass: MassUnit; length: LengthUnit }

export const SI_UNITS: Units = { temp: 'degC', mass: 'kg', length: 'mm' }

/** How each unit is written behind a number. */
export const UNIT_SIGNS = { degC: '°C', degF: '°F', kg: 'kg', lb: 'lb', mm: 'mm', inch: 'in' } as const satisfies Record<
  TempUnit | MassUnit | LengthUnit,
  string
>

/** @source NIST SP 811 (2008), appendix B.8: the pound and the inch by definition. */
const KG_PER_LB = 0.45359237
const MM_PER_INCH = 25.4

/**
 * A stored value as somebody reads it, unrounded.
 *
 * @example fromSi(21, 'degF') // => 69.8
 */
export function fromSi(value: number, unit: TempUnit | MassUnit | LengthUnit): number {
  if (unit === 'degF') return value * 1.8 + 32
  if (unit === 'lb') return value / KG_PER_LB
  if (unit === 'inch') return value / MM_PER_INCH
  return value
}

/**
 * A value that somebody typed, as it is stored; the inverse of `fromSi`.
 *
 * @example toSi(69.8, 'degF') // => 21
 */
export function toSi(value: number, unit: TempUnit | MassUnit | LengthUnit): number {
  if (unit === 'degF') return (value - 32) / 1.8
  if (unit === 'lb') return value * KG_PER_LB
  if (unit === 'inch') return value * MM_PER_INCH
  return value
}

/** Temperature, one decimal: '21.8 °C', '71.2 °F'. */
export function formatTemperature(celsius: number | null, unit: TempUnit = 'degC'): string {
  return celsius === null ? NONE : `${oneDecimal(fromSi(celsius, unit))}${NO_BREAK}${UNIT_SIGNS[unit]}`
}

/** A difference of temperatures, one decimal: '5.4 K', '9.7 °F' (a difference: no 32 is added). */
export function formatKelvin(kelvin: number | null, unit: TempUnit = 'degC'): string {
  if (kelvin === null) return NONE
  return unit === 'degF' ? `${oneDecimal(kelvin * 1.8)}${NO_BREAK}°F` : `${oneDecimal(kelvin)}${NO_BREAK}K`
}

/** Mass, one decimal: '23.6 kg', '52.0 lb'. */
export function formatMass(kg: number | null, unit: MassUnit = 'kg'): string {
  return kg === null ? NONE : `${oneDecimal(fromSi(kg, unit))}${NO_BREAK}${UNIT_SIGNS[unit]}`
}

/** Length, whole millimetres or one decimal of an inch: '40 mm', '1.6 in'. */
export function formatLength(mm: number | null, unit: LengthUnit = 'mm'): string {
  if (mm === null) return NONE
  return `${unit === 'mm' ? wholeNumber(mm) : oneDecimal(fromSi(mm, unit))}${NO_BREAK}${UNIT_SIGNS[unit]}`
}

/** Whole percent: '58 %'. */
export function formatPercent(percent: number | null): string {
  return percent === null ? NONE : `${wholeNumber(percent)}${NO_BREAK}%`
}

/** A share between 0 and 1 as whole percent: 0.384 is '38 %'. */
export function formatShare(share: number | null): string {
  return share === null ? NONE : formatPercent(share * 100)
}

/** Pressure of the air, whole hectopascals, as a barometer shows it: '1009 hPa'. */
export function formatPressure(pascals: number): string {
  return `${wholeNumber(pascals / 100)}${NO_BREAK}hPa`
}

/** '45 s'. */
export function formatSeconds(seconds: number): string {
  return `${seconds}${NO_BREAK}s`
}

/** One decimal without unit, for where the unit is set apart: '21.8'. A minus keeps its own sign. */
export function oneDecimal(value: number): string {
  // Adding 0 turns -0 into 0.
  return (Math.round(value * 10) / 10 + 0).toFixed(1).replace('-', '−')
}

/** Whole number without unit. */
export function wholeNumber(value: number): string {
  return String(Math.round(value) + 0).replace('-', '−')
}
