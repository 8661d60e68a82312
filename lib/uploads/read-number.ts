/** What loggers write where there is no value. */
const NO_VALUE = /^(?:-+|n\/?a|nan|null|none|err(?:or)?|ol|lo|hi|\*+|\?+)$/i
/** A unit that stands in the cell itself. */
const UNIT = /\s*(?:°\s?[CF]|deg\.?\s?[CF]|º\s?[CF]|[CF]|%\s?(?:r\.?h\.?|r\.?f\.?)?|r\.?h\.?|hPa|Pa|mbar)\.?$/i
const GROUPED_BY_COMMA = /^[+-]?\d{1,3}(?:,\d{3})+(?:\.\d+)?$/
const GROUPED_BY_POINT = /^[+-]?\d{1,3}(?:\.\d{3})+(?:,\d+)?$/
const PLAIN = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?$/i

/**
 * A number as a logger writes it: with a point or a comma, grouped thousands, any minus sign, a unit behind it.
 *
 * @returns null for an empty cell or one of the usual marks for 'no value'; NaN for anything that is no number.
 * @example readNumber('21,4 °C', true) // => 21.4
 * @example readNumber('1,013.2', false) // => 1013.2
 * @example readNumber('21,4', false) // => NaN
 */
export function readNumber(cell: string, hasDecimalComma: boolean): number | null {
  let text = cell.trim()
  if (text === '' || NO_VALUE.test(text)) return null
  if (PLAIN.test(text) && !hasDecimalComma) return Number(text)
  text = text
    .replace(UNIT, '')
    .replace('−', '-')
    .replaceAll(/[\s\u00A0']/g, '')
  const grouped = hasDecimalComma ? GROUPED_BY_POINT : GROUPED_BY_COMMA
  if (grouped.test(text)) text = text.replaceAll(hasDecimalComma ? '.' : ',', '')
  if (hasDecimalComma) {
    // Whole numbers look the same in both; '21.4' beside decimal commas is some other column's number, or the wrong choice.
    if (text.includes('.')) return Number.NaN
    text = text.replace(',', '.')
  }
  return PLAIN.test(text) ? Number(text) : Number.NaN
}
