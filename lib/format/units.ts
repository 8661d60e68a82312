const NO_BREAK = '\u00A0'
const NONE = '–'

/** Temperature, one decimal: '21.8 °C'. */
export function formatTemperature(celsius: number | null): string {
  return celsius === null ? NONE : `${oneDecimal(celsius)}${NO_BREAK}°C`
}

/** A difference of temperatures, one decimal: '5.4 K'. */
export function formatKelvin(kelvin: number | null): string {
  return kelvin === null ? NONE : `${oneDecimal(kelvin)}${NO_BREAK}K`
}

/** Whole percent: '58 %'. */
export function formatPercent(percent: number | null): string {
  return percent === null ? NONE : `${wholeNumber(percent)}${NO_BREAK}%`
}

/** A share between 0 and 1 as whole percent: 0.384 is '38 %'. */
export function formatShare(share: number | null): string {
  return share === null ? NONE : formatPercent(share * 100)
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
