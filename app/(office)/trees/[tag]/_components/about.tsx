import Link from 'next/link'
import type { ReactNode } from 'react'
import { NOT_CALIBRATED } from '@/app/(office)/_components/due-words'
import { formatDate, formatDay, formatMoment } from '@/lib/format/local-time'
import { typedWords } from '@/lib/format/typed-units'
import type { MassUnit } from '@/lib/format/units'
import type { TreeDetail } from '@/lib/trees/detail-contract'

/** To the very version that the tree stands on, which may not be the newest. */
export function RecipeLink({ recipe, children }: { recipe: TreeDetail['recipe']; children: ReactNode }) {
  return (
    <Link className="underline underline-offset-4" href={`/recipes/${recipe.id}?version=${recipe.version}`} prefetch={false}>
      {children}
    </Link>
  )
}

/** What the tree is: its pieces, recipe, wax and cup. */
export function About({ detail, massUnit, now, timeZone }: { detail: TreeDetail; massUnit: MassUnit; now: number; timeZone: string }) {
  const { intake } = detail
  const facts: [string, ReactNode][] = [
    ...detail.pieces.map((piece, index): [string, ReactNode] => [
      detail.pieces.length === 1 ? 'Piece' : `Piece ${index + 1}`,
      <>
        <Link className="underline underline-offset-4" href={`/works/${piece.workId}`} prefetch={false}>
          {piece.workTitle}
        </Link>
        {`${piece.sectionName === '' ? '' : `, ${piece.sectionName}`}, edition ${piece.editionNumber}${piece.isRecast ? ', recast' : ''}`}
      </>,
    ]),
    [
      'Recipe',
      <>
        <RecipeLink recipe={detail.recipe}>
          {detail.recipe.name}, version {detail.recipe.version}
        </RecipeLink>
        {detail.recipe.isCalibrated ? '' : `, ${NOT_CALIBRATED}`}
      </>,
    ],
    ['Treed', `${formatDate(detail.createdAt, timeZone)}${detail.createdBy === null ? '' : ` by ${detail.createdBy}`}`],
    ['Place', detail.tree.place.name],
    ['Pour date', detail.tree.pourDate === null ? 'none set' : formatDay(detail.tree.pourDate)],
    ['Wax', typedWords(detail.waxMassKg, massUnit)],
    ['Cup', `${detail.cupKind}, ${detail.cupVolumeL} L`],
    ['Deepest recess', detail.recessClass],
    ['Spacing', detail.spacing],
    ...(detail.hungMassKg === null ? [] : [['Weight as hung', typedWords(detail.hungMassKg, massUnit)] as [string, ReactNode]]),
    [
      'Intake',
      intake.passedAt === null
        ? 'open'
        : `passed by ${intake.passedBy ?? 'somebody'}, ${formatMoment(intake.passedAt, now, timeZone)}; wax ${intake.waxSurface ?? 'not said'}`,
    ],
  ]
  return (
    <dl className="facts">
      {facts.map(([term, words]) => (
        <div key={term}>
          <dt>{term}</dt>
          <dd>{words}</dd>
        </div>
      ))}
    </dl>
  )
}
