import type { CoatKind, Stucco } from '@/lib/coats/vocabulary'
import type { TreeState } from '@/lib/trees/states'

/** What a band of the drawn shell looks like. A seal has no stucco. */
export type BandGrade = 'fine' | 'medium' | 'coarse' | 'seal'

export type SectionCoat = { grade: BandGrade; hasPatch?: boolean }

/** How the drawing stands: the tree's state, as far as it can be drawn. */
export type SectionState =
  | 'bare'
  | 'waxready'
  | 'wet'
  | 'drying'
  | 'nearly'
  | 'unknown'
  | 'dry'
  | 'waiting'
  | 'overdue'
  | 'last'
  | 'dried'
  | 'ready'
  | 'released'
  | 'held'
  | 'scrapped'

export type SectionDrawing = {
  /** Every coat of the recipe, inner coat first. */
  coats: SectionCoat[]
  /** Coats that are closed: dry or buried. */
  done: number
  /** The newest coat while it dries, with the share of its water that is gone, 0 to 1. */
  open: { dry: number } | null
  state: SectionState
  /** Share of the water gone at which the open coat may be dipped over. */
  target: number
}

const DRAWN: Record<TreeState, SectionState> = {
  scrapped: 'scrapped',
  released: 'released',
  held: 'held',
  'bare wax': 'bare',
  'wax ready': 'waxready',
  overdue: 'overdue',
  'dip now': 'dry',
  waiting: 'waiting',
  unknown: 'unknown',
  'nearly dry': 'nearly',
  drying: 'drying',
  wet: 'wet',
  'last coat on': 'last',
  'dried out': 'dried',
  'ready for burnout': 'ready',
}

const STILL_OPEN: ReadonlySet<TreeState> = new Set(['wet', 'drying', 'nearly dry', 'unknown', 'last coat on'])

/** How a coat is drawn in the shell section: by its stucco, or as a seal. */
export function bandGrade(coat: { kind: CoatKind; stucco: Stucco }): BandGrade {
  return coat.kind === 'seal' || coat.stucco === 'none' ? 'seal' : coat.stucco
}

/** The drawing of a tree as it hangs. */
export function sectionOf(tree: {
  state: TreeState
  coatsOn: number
  coats: readonly { kind: CoatKind; stucco: Stucco }[]
  openDry: number | null
  openTarget: number
}): SectionDrawing {
  const coats = tree.coats.map((coat) => ({ grade: bandGrade(coat) }))
  // A coat beyond the recipe still hangs on the tree: draw it like the one below.
  while (coats.length < tree.coatsOn) coats.push({ grade: coats.at(-1)?.grade ?? 'coarse' })
  const isOpen =
    tree.coatsOn > 0 && (STILL_OPEN.has(tree.state) || (tree.state === 'held' && tree.openDry !== null && tree.openDry < tree.openTarget))
  return {
    coats,
    done: isOpen ? tree.coatsOn - 1 : tree.coatsOn,
    open: isOpen ? { dry: Math.min(1, Math.max(0, tree.openDry ?? 0)) } : null,
    state: DRAWN[tree.state],
    target: tree.openTarget,
  }
}

/** The drawing as a sentence, for those who hear it. */
export function describeSection({ coats, done, open, state, target }: SectionDrawing): string {
  const total = coats.length
  const on = done + (open ? 1 : 0)
  const grade = (index: number) => coats[index]?.grade ?? 'no coat'
  const next = on < total ? ` Next: dip ${on + 1} of ${total}, ${grade(on)}.` : ''
  switch (state) {
    case 'bare':
      return `Bare wax, ${total} coats to come.`
    case 'waxready':
      return `Wax ready, 0 on. Next: dip 1 of ${total}, ${grade(0)}.`
    case 'held':
      return `Held, ${on} of ${total} on.`
    case 'scrapped':
      return `Scrapped with ${on} of ${total} on.`
    case 'ready':
      return `Ready for burnout, ${total} of ${total} on, looked over.`
    case 'released':
      return `Released to burnout, ${total} of ${total} on.`
    case 'dried':
      return `Dried out, ${total} of ${total} on. Look it over.`
    case 'unknown':
      return `Coat ${on} of ${total}, ${grade(on - 1)}: how dry is not known.`
    case 'dry':
      return `${on} on and dry.${next}`
    case 'waiting':
      return `${on} on and dry, waiting.${next}`
    case 'overdue':
      return `${on} on and dry, overdue.${next}`
    case 'last':
    case 'wet':
    case 'drying':
    case 'nearly':
      break
  }
  if (!open) return `${on} of ${total} on.${next}`
  const dry = Math.round(open.dry * 100)
  const goal = Math.round(target * 100)
  return on >= total
    ? `Last coat on, ${total} of ${total}: ${dry} % dry, dried out at ${goal} %.`
    : `Coat ${on} of ${total}, ${grade(done)}: ${dry} % dry, dip at ${goal} %.`
}
