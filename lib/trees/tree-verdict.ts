import { formatDuration } from '@/lib/format/duration'
import type { QueueTree } from '@/lib/queue/contract'

/** What the tree page says first: a verdict, what the pair of times means, and the next act. */
export type TreeVerdict = {
  headline: string
  /** Words before the pair of times; null where no pair belongs. */
  pairLead: string | null
  next: string | null
}

type VerdictTree = Pick<
  QueueTree,
  'state' | 'stateSince' | 'coats' | 'coatsOn' | 'newestCoat' | 'next' | 'dry' | 'guard' | 'word' | 'hold' | 'moistureRatio'
>

/** 'dip 6: Backup slurry, coarse stucco', or 'dip 8, seal: Backup slurry, no stucco'. */
export function nextDipWords(next: NonNullable<QueueTree['next']>): string {
  const kind = next.kind === 'seal' || next.kind === 'core fill' ? `, ${next.kind}` : ''
  const slurry = /slurry$/i.test(next.bathName) ? next.bathName : `${next.bathName} slurry`
  return `dip ${next.number}${kind}: ${slurry}, ${next.stucco === 'none' ? 'no' : next.stucco} stucco`
}

/** The verdict on a tree as it hangs now. */
export function treeVerdict(tree: VerdictTree, now: number): TreeVerdict {
  const total = Math.max(tree.coats.length, tree.coatsOn, tree.next?.number ?? 0)
  const coat = tree.newestCoat === null ? 'Bare wax' : `Coat ${tree.newestCoat.number} of ${total}`
  const dip = tree.next === null ? '' : `dip ${tree.next.number} of ${total}`
  const next = tree.next === null ? null : `Then ${nextDipWords(tree.next)}.`
  const go = tree.next === null ? null : `${capital(nextDipWords(tree.next))}.`
  const since = tree.stateSince === null ? '' : ` ${formatDuration(now - tree.stateSince)}`
  const byEye = seenDryBy(tree, now)
  const pairLead = tree.dry === null ? null : byEye === null ? 'Dry' : 'By the clock dry'
  switch (tree.state) {
    case 'bare wax':
      return { headline: 'Bare wax', pairLead: null, next: 'Pass the intake below, then coat 1 may go on.' }
    case 'wax ready':
      return { headline: `Wax ready for ${dip}`, pairLead: null, next: go }
    case 'wet':
      return { headline: `${coat} wet`, pairLead: 'Dry', next }
    case 'drying':
      return { headline: `${coat} drying`, pairLead: 'Dry', next }
    case 'nearly dry':
      return { headline: `${coat} nearly dry`, pairLead: 'Dry', next }
    case 'unknown':
      return { headline: `${coat}: dryness unknown`, pairLead: tree.dry === null ? null : 'Last forecast: dry', next }
    case 'dip now':
      return { headline: byEye === null ? `Dry: ${dip} now` : `Looks dry to ${byEye}: ${dip}`, pairLead, next: go }
    case 'waiting':
      return {
        headline: byEye === null ? `Dry, waiting${since} for ${dip}` : `Looks dry to ${byEye}, waiting${since} for ${dip}`,
        pairLead,
        next: go,
      }
    case 'overdue':
      return { headline: `Overdue${since}: ${dip}`, pairLead, next: go }
    case 'last coat on':
      return { headline: `Last coat on, ${tree.coatsOn} of ${total}`, pairLead: 'Dried out', next: 'Then look it over.' }
    case 'dried out':
      return { headline: 'Dried out', pairLead: null, next: 'Look it over: cracks, thin edges, dark or cool spots, cup and vents.' }
    case 'ready for burnout':
      return { headline: 'Ready for burnout', pairLead: null, next: 'Dried out and looked over. A supervisor releases it to the kiln.' }
    case 'released':
      return { headline: 'Released to burnout', pairLead: null, next: 'It has left the shell room; its log is closed.' }
    case 'scrapped':
      return { headline: 'Scrapped', pairLead: null, next: 'Its log is closed.' }
    case 'held':
      return {
        headline: 'Held',
        pairLead: tree.dry === null ? null : tree.next === null ? 'Dried out' : 'Dry',
        next: next === null ? 'Lift the hold before its release.' : `Lift the hold, then ${nextDipWords(tree.next!)}.`,
      }
  }
}

/** Who said 'dry' while the clock's own guard still lies ahead; null where the clock says it too. */
function seenDryBy(tree: Pick<QueueTree, 'dry' | 'guard' | 'word'>, now: number): string | null {
  if (tree.word?.verdict !== 'dry') return null
  const guardAt = tree.guard === 'likely' ? tree.dry?.likelyAt : tree.dry?.safeAt
  return guardAt != null && guardAt <= now ? null : tree.word.by
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1)
}

/** What stands under a coat of the big section: on which day it went on, or that it dries now. */
export function coatCaption(tree: VerdictTree, number: number): 'on' | 'open' | 'next' | 'to come' {
  if (tree.newestCoat !== null && number < tree.newestCoat.number) return 'on'
  if (tree.newestCoat?.number === number) {
    return ['wet', 'drying', 'nearly dry', 'unknown', 'last coat on'].includes(tree.state) ? 'open' : 'on'
  }
  return tree.next?.number === number ? 'next' : 'to come'
}
