'use client'

import { ShellSection } from '@/app/_components/shell-section'
import type { CoatKind, Stucco } from '@/lib/coats/vocabulary'
import { coatsInShort } from '@/lib/recipes/coat-cells'
import { bandGrade, type SectionDrawing } from '@/lib/trees/section'
import { sectionBands } from '@/lib/trees/section-bands'

const WIDE = { width: 1324, height: 160 }
const NARROW = { width: 358, height: 80 }
/** A band narrower than this has room for its number alone; under the second not even for that. */
const ROOM_FOR_WORD = 58
const ROOM_FOR_NUMBER = 16

type DrawnCoat = { kind: CoatKind; stucco: Stucco }

/** A recipe's shell with every coat on, as it is drawn beside a row. */
export function SmallRecipeSection({ coats, fit }: { coats: readonly DrawnCoat[]; fit: number }) {
  return <ShellSection {...drawingOf(coats)} height={28} fit={fit} isDecoration />
}

/** The shell that a recipe builds, across the page, with a caption under each coat. */
export function RecipeSection({ coats }: { coats: readonly DrawnCoat[] }) {
  const drawing = drawingOf(coats)
  const { edges } = sectionBands(drawing, WIDE)
  const label = coats.length === 0 ? 'The wax, and no coat yet.' : `The shell of ${coats.length} coats: ${coatsInShort(coats)}.`
  return (
    <div className="recipe-section">
      <div className="recipe-section-narrow" aria-hidden="true">
        <ShellSection {...drawing} {...NARROW} className="h-auto w-full" isDecoration />
      </div>
      <ShellSection {...drawing} {...WIDE} className="recipe-section-wide h-auto w-full" label={label} />
      {/* The table below says the same. */}
      <div className="captions" aria-hidden="true">
        {edges.map(([inner, outer], index) => {
          const number = index + 1
          const width = outer - inner
          const grade = drawing.coats[index]?.grade
          return (
            <span key={number} style={{ left: `${(inner / WIDE.width) * 100}%`, width: `${(width / WIDE.width) * 100}%` }}>
              {width >= ROOM_FOR_NUMBER && <b>{number}</b>}
              {width >= ROOM_FOR_WORD && (coats[index]?.kind === 'core fill' ? 'core fill' : grade)}
            </span>
          )
        })}
      </div>
    </div>
  )
}

function drawingOf(coats: readonly DrawnCoat[]): SectionDrawing {
  return { coats: coats.map((coat) => ({ grade: bandGrade(coat) })), done: coats.length, open: null, state: 'dried', target: 0.9 }
}
