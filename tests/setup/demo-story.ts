import { happenings } from '@/lib/demo/happenings'
import type { DemoPlan } from '@/lib/demo/plan'

type Told = { coats: number; isHeld: boolean; hasIntake: boolean; hasLeft: boolean }

/** What the commands or the tables would refuse in a planned past: each as a few words, and none where it can be acted out. */
export function troubleOfStory(plan: DemoPlan): string[] {
  const trees = new Map<string, Told>()
  const trouble: string[] = []
  const unless = (isSo: boolean, words: string) => {
    if (!isSo) trouble.push(words)
  }
  for (const happening of happenings(plan)) {
    const { at, kind } = happening
    unless(Number.isInteger(at), `${kind} at ${at}: tables take whole milliseconds`)
    if (kind === 'stir' || kind === 'reading') continue
    if (kind === 'tree added') {
      unless(!trees.has(happening.tree.tag), `${happening.tree.tag} added twice`)
      trees.set(happening.tree.tag, { coats: 0, isHeld: false, hasIntake: false, hasLeft: false })
      continue
    }
    const dips = kind === 'run' ? happening.dips.map(({ tree, coat }) => ({ tag: tree.tag, coat })) : []
    const touched = kind === 'run' ? dips.map(({ tag }) => tag) : [happening.tree.tag]
    for (const tag of touched) {
      const tree = trees.get(tag)
      unless(tree !== undefined && !tree.hasLeft, `${tag}: ${kind} while it is not on the floor`)
    }
    for (const { tag, coat } of dips) {
      const tree = trees.get(tag)
      if (!tree) continue
      unless(Number.isInteger(coat.dippedAt) && coat.dippedAt <= at, `${tag}: coat ${coat.number} at ${coat.dippedAt}, told at ${at}`)
      unless(coat.number === tree.coats + 1, `${tag}: coat ${coat.number} over ${tree.coats}`)
      unless(tree.hasIntake && !tree.isHeld, `${tag}: coat ${coat.number} while it waits for intake or is held`)
      tree.coats = coat.number
    }
    const tree = trees.get(touched[0] ?? '')
    if (!tree || kind === 'run') continue
    if (kind === 'hold' || kind === 'lift') {
      unless(tree.isHeld === (kind === 'lift'), `${touched[0]}: ${kind} for the second time`)
      tree.isHeld = kind === 'hold'
    }
    if (kind === 'look-over' || kind === 'release') unless(tree.coats > 0, `${touched[0]}: ${kind} without a coat`)
    if (kind === 'intake') tree.hasIntake = true
    if (kind === 'release' || kind === 'scrap') tree.hasLeft = true
  }
  return trouble
}
