'use client'

import Link from 'next/link'
import { ActForm } from '@/app/(office)/settings/_components/act-form'
import { goBackAction } from '@/app/(office)/calibration/actions'
import { factorWords } from '@/lib/calibration/calibration-words'
import { formatDateOfYear } from '@/lib/format/local-time'
import type { CalibrationPage } from '@/lib/queries/calibration'
import { shortNumber } from '@/lib/recipes/coat-cells'

type Accepted = CalibrationPage['accepted'][number]

/** What was taken over and gone back on, newest first. */
export function AcceptedRows({ rows, timeZone }: { rows: readonly Accepted[]; timeZone: string }) {
  return (
    <ul className="factor-rows">
      {rows.map((row) => (
        <li key={row.id}>
          <div className="min-w-0">
            <p className="[overflow-wrap:anywhere]">
              <Subject row={row} />: <b className="num">{figureWords(row)}</b>
              {row.goesBackOn !== null && ', gone back'}
            </p>
            <p className="text-soot">
              {row.by}, {formatDateOfYear(row.at, timeZone)}
              {row.coatsAfter !== null && row.goesBackOn === null && `, by ${row.coatsAfter === 1 ? '1 coat' : `${row.coatsAfter} coats`}`}
            </p>
          </div>
          {row.mayGoBack && (
            <ActForm action={() => goBackAction(row.id)} label={`Go back: ${subjectWords(row)}`}>
              Go back
            </ActForm>
          )}
        </li>
      ))}
    </ul>
  )
}

function subjectWords({ scope, recipeName, coatNumber, placeName, recessClass }: Accepted): string {
  if (scope === 'recipe coat') return `${recipeName ?? 'a recipe'}, coat ${coatNumber}`
  return scope === 'place' ? `air of ${placeName ?? 'a place'}` : `trees with a ${recessClass}`
}

function Subject({ row }: { row: Accepted }) {
  if (row.recipeId === null) return <>{subjectWords(row).replace(/^./, (letter) => letter.toUpperCase())}</>
  return (
    <Link className="underline underline-offset-4" href={`/recipes/${row.recipeId}`} prefetch={false}>
      {subjectWords(row)}
    </Link>
  )
}

function figureWords({ scope, figureBefore, figureAfter }: Accepted): string {
  if (scope !== 'recipe coat') return `factor ${factorWords(figureBefore)} to ${factorWords(figureAfter)}`
  if (figureBefore === figureAfter) return `${shortNumber(figureAfter)} reference hours as before`
  return `${shortNumber(figureBefore)} to ${shortNumber(figureAfter)} reference hours`
}
