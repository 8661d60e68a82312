import { formatDuration } from '@/lib/format/duration'
import type { TreeState } from '@/lib/trees/states'

/** Role of a state's colour. The colour is the third sign, after the mark and the word. */
export type StateTone = 'wax' | 'wet' | 'ochre' | 'verdigris' | 'furnace' | 'ink' | 'soot'

const WORDS: Record<TreeState, { word: string; tone: StateTone; counts: boolean }> = {
  scrapped: { word: 'Scrapped', tone: 'soot', counts: false },
  released: { word: 'Released', tone: 'ink', counts: false },
  held: { word: 'Held', tone: 'furnace', counts: false },
  'bare wax': { word: 'Bare wax', tone: 'wax', counts: false },
  'wax ready': { word: 'Wax ready', tone: 'wax', counts: false },
  overdue: { word: 'Overdue', tone: 'furnace', counts: true },
  'dip now': { word: 'Dip now', tone: 'verdigris', counts: false },
  waiting: { word: 'Waiting', tone: 'verdigris', counts: true },
  unknown: { word: 'Unknown', tone: 'soot', counts: false },
  'nearly dry': { word: 'Nearly dry', tone: 'ochre', counts: false },
  drying: { word: 'Drying', tone: 'wet', counts: false },
  wet: { word: 'Wet', tone: 'wet', counts: false },
  'last coat on': { word: 'Last coat on', tone: 'wet', counts: false },
  'dried out': { word: 'Dried out, look over', tone: 'ink', counts: false },
  'ready for burnout': { word: 'Ready for burnout', tone: 'ink', counts: false },
}

/** Colour role of a state; mark and word say the same without it. */
export function stateTone(state: TreeState): StateTone {
  return WORDS[state].tone
}

/** The state in the words of the floor: 'Waiting 35 min', 'Overdue 1 h 05 min', 'Dried out, look over'. */
export function stateWords(state: TreeState, since: number | null, now: number): string {
  const { word, counts } = WORDS[state]
  if (!counts || since === null) return word
  return `${word} ${formatDuration(now - since)}`
}
