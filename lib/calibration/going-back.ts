import type { CalibrationScope, ClockNow, Recess } from '@/lib/calibration/types'

/** A figure that somebody took over, or went back on. */
export type CalibrationRow = {
  id: string
  scope: CalibrationScope
  recipeId: string | null
  coatNumber: number | null
  placeId: string | null
  recessClass: Recess | null
  figureBefore: number
  figureAfter: number
  spreadBefore: number | null
  spreadAfter: number | null
  coatsBefore: number | null
  coatsAfter: number | null
  goesBackOn: string | null
}

const subjectOf = ({ scope, recipeId, coatNumber, placeId, recessClass }: CalibrationRow) =>
  [scope, recipeId, coatNumber, placeId, recessClass].join(' ')

/**
 * Which of the rows can be gone back on: of each subject the newest that stands, as long as its figure has not been changed by hand since.
 *
 * @param rows newest first.
 */
export function canGoBack(rows: readonly CalibrationRow[], now: ClockNow): Set<string> {
  const goneBackOn = new Set(rows.map(({ goesBackOn }) => goesBackOn))
  const seen = new Set<string>()
  const open = new Set<string>()
  for (const row of rows) {
    if (row.goesBackOn !== null || goneBackOn.has(row.id) || seen.has(subjectOf(row))) continue
    seen.add(subjectOf(row))
    if (stands(row, now)) open.add(row.id)
  }
  return open
}

function stands(row: CalibrationRow, now: ClockNow): boolean {
  if (row.scope === 'place') return isSame(now.airFactors.get(row.placeId ?? ''), row.figureAfter)
  if (row.scope === 'recess') return row.recessClass !== null && isSame(now.recessFactors[row.recessClass], row.figureAfter)
  const coat = now.recipeCoats.find(({ recipeId, number }) => recipeId === row.recipeId && number === row.coatNumber)
  return coat !== undefined && isSame(coat.needReferenceHours, row.figureAfter) && coat.calibratedByCoats === row.coatsAfter
}

const isSame = (one: number | undefined, other: number) => one !== undefined && Math.abs(one - other) < 1e-9
