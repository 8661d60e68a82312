import { stringify } from 'csv-stringify/sync'

/** One column of a file: its head, with the unit where there is one, and the value of a row. */
export type CsvColumn<Row> = { head: string; value: (row: Row) => string | number | null }

/**
 * Rows as CSV (RFC 4180, UTF-8). Text that a spreadsheet would run as a formula gets a leading apostrophe; numbers stay numbers.
 *
 * @param withHead false for the later parts of a file that is sent piece by piece.
 */
export function csvText<Row>(columns: readonly CsvColumn<Row>[], rows: readonly Row[], withHead = true): string {
  const records = rows.map((row) =>
    columns.map(({ value }) => value(row)).map((cell) => (typeof cell === 'string' ? plainText(cell) : cell)),
  )
  return stringify(withHead ? [columns.map(({ head }) => head), ...records] : records, { escape_formulas: true, record_delimiter: '\r\n' })
}

// A NUL in front hides a formula from the check and is dropped by the spreadsheet.
const plainText = (text: string) => text.replaceAll('\u0000', '')

/**
 * A CSV file as an answer, sent as its parts are made: the first with the head.
 *
 * @param parts each is asked for when the one before has gone out; an empty one ends the file.
 */
export function csvResponse<Row>(
  fileName: string,
  columns: readonly CsvColumn<Row>[],
  parts: (index: number) => Promise<readonly Row[]>,
): Response {
  const encoder = new TextEncoder()
  let index = 0
  const body = new ReadableStream({
    async pull(controller) {
      const rows = await parts(index)
      if (rows.length > 0 || index === 0) controller.enqueue(encoder.encode(csvText(columns, rows, index === 0)))
      if (rows.length === 0) controller.close()
      index += 1
    },
  })
  return new Response(body, {
    headers: {
      'content-type': 'text/csv; charset=utf-8; header=present',
      'content-disposition': `attachment; filename="${fileName}"`,
      'cache-control': 'no-store',
    },
  })
}
