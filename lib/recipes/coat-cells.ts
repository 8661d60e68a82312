import type { CoatKind, Guard, Stucco } from '@/lib/coats/vocabulary'

/** A coat as a version of a recipe holds it. */
export type VersionCoat = {
  number: number
  kind: CoatKind
  bathId: string
  bathName: string
  stucco: Stucco
  needReferenceHours: number
  moistureTarget: number
  guard: Guard
  drainSeconds: number
  longestWaitHours: number
  isPrewet: boolean
  readAloud: string
}

/** What is written of a coat, in the order of its table; `unit` stands behind the figure. */
export const COAT_CELLS = [
  { key: 'kind', word: 'Kind', unit: '' },
  { key: 'bath', word: 'Bath', unit: '' },
  { key: 'stucco', word: 'Stucco', unit: '' },
  { key: 'need', word: 'Need', unit: 'h' },
  { key: 'target', word: 'Water left', unit: '%' },
  { key: 'guard', word: 'Guard', unit: '' },
  { key: 'drain', word: 'Drain', unit: 's' },
  { key: 'longestWait', word: 'Longest wait', unit: 'h' },
  { key: 'prewet', word: 'Prewet', unit: '' },
  { key: 'readAloud', word: 'Read aloud', unit: '' },
] as const
export type CoatCell = (typeof COAT_CELLS)[number]['key']

/** A coat in words: one text a cell, without its unit. Two coats are the same when these are. */
export type CoatCells = Record<CoatCell, string>

/** Up to two decimals, none that say nothing: 4.499 is '4.5', 12 is '12'. Finer than this nobody waits. */
export const shortNumber = (value: number): string => String(Math.round(value * 100) / 100)

/** A stored coat in words: reference hours, percent, seconds and hours as figures, no read-aloud line as ''. */
export function coatCells(coat: Omit<VersionCoat, 'number' | 'bathId'>): CoatCells {
  return {
    kind: coat.kind,
    bath: coat.bathName,
    stucco: coat.stucco,
    need: shortNumber(coat.needReferenceHours),
    target: shortNumber(coat.moistureTarget * 100),
    guard: coat.guard,
    drain: shortNumber(coat.drainSeconds),
    longestWait: shortNumber(coat.longestWaitHours),
    prewet: coat.isPrewet ? 'yes' : 'no',
    readAloud: coat.readAloud,
  }
}

/** A cell's text with its unit, a sentence in quotes; an empty one is 'nothing'. */
export function cellWords(key: CoatCell, text: string): string {
  const unit = COAT_CELLS.find((cell) => cell.key === key)?.unit ?? ''
  if (text === '') return 'nothing'
  if (key === 'readAloud') return `‘${text}’`
  return unit === '' ? text : `${text}\u00A0${unit}`
}

/**
 * The coats of a recipe in one line, inner coat first, equal neighbours counted together.
 *
 * @example coatsInShort(eightCoats) // => '2 fine, 2 medium, 3 coarse, seal'
 */
export function coatsInShort(coats: readonly { kind: CoatKind; stucco: Stucco }[]): string {
  const runs: { word: string; count: number }[] = []
  for (const { kind, stucco } of coats) {
    const word = kind === 'seal' || kind === 'core fill' ? kind : stucco
    const last = runs.at(-1)
    if (last?.word === word) last.count += 1
    else runs.push({ word, count: 1 })
  }
  return runs.map(({ word, count }) => (count === 1 && (word === 'seal' || word === 'core fill') ? word : `${count} ${word}`)).join(', ')
}

/** What a need stands for: other kinds, baths, grades, targets or a prewet make another coat, and its hours have to be checked anew. */
const OF_THE_NEED = ['kind', 'bath', 'stucco', 'need', 'target', 'prewet'] as const satisfies readonly CoatCell[]

/** Whether nothing that a need rests on differs between two coats, so that a calibration of the one holds for the other. */
export const isNeedSame = (before: CoatCells, after: CoatCells): boolean => OF_THE_NEED.every((key) => before[key] === after[key])
