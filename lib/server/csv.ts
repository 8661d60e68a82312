import { stringify } from 'csv-stringify/sync'

export type CsvValue = string | number | null

/**
 * A CSV file as a download: UTF-8 with its mark, so that spreadsheets read it as such, a head line, RFC 4180 line ends.
 * A text that a spreadsheet would take for a formula is made harmless with a leading apostrophe; numbers stay numbers.
 *
 * @param columns names in order, with their units.
 */
export function csvResponse(fileName: string, columns: readonly string[], rows: readonly (readonly CsvValue[])[]): Response {
  const text = stringify(
    rows.map((row) => [...row]),
    { header: true, columns: [...columns], escape_formulas: true, record_delimiter: 'windows', bom: true },
  )
  return new Response(text, {
    headers: {
      'content-type': 'text/csv; charset=utf-8',
      'content-disposition': `attachment; filename="${fileName.replaceAll(/[^\w.-]+/g, '-')}"`,
      'cache-control': 'private, no-store',
    },
  })
}
