/** 'draft': the file is here, and somebody says how it is to be read. */
export const UPLOAD_STATES = ['draft', 'waiting', 'running', 'done', 'failed', 'cancelled'] as const
export type UploadState = (typeof UPLOAD_STATES)[number]

/** Whether nothing more will come of an upload. */
export function isEnded(state: UploadState): boolean {
  return state === 'done' || state === 'failed' || state === 'cancelled'
}

export type UploadCounts = { added: number; repeated: number; marked: number; rejected: number }

const number = new Intl.NumberFormat('en-GB')

/**
 * A count with its thousands apart: '12,345'.
 *
 * @example countText(1_000_000) // => '1,000,000'
 */
export function countText(count: number): string {
  return number.format(count)
}

/**
 * What became of the rows, in a line.
 *
 * @example countWords({ added: 1200, repeated: 3, marked: 0, rejected: 1 }) // => '1,200 new, 3 known already, 1 not read'
 */
export function countWords({ added, repeated, marked, rejected }: UploadCounts): string {
  return [
    `${countText(added)} new`,
    ...(repeated > 0 ? [`${countText(repeated)} known already`] : []),
    ...(marked > 0 ? [`${countText(marked)} kept and not counted`] : []),
    ...(rejected > 0 ? [`${countText(rejected)} not read`] : []),
  ].join(', ')
}
