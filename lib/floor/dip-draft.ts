import type { CoatingWay, Stucco } from '@/lib/coats/vocabulary'
import type { DipRun } from '@/lib/coats/dip-contract'
import { readTyped, typedWords } from '@/lib/format/typed-units'
import { UNIT_SIGNS, type TempUnit } from '@/lib/format/units'
import type { Queue, QueueTree } from '@/lib/queue/contract'
import { AIR_TEMP_LIMITS_C, humidityProblem } from '@/lib/room/air-limits'
import type { TreeState } from '@/lib/trees/states'

const MINUTE_MS = 60_000

/** When the dip was made. 'ago' keys are rough by half their own length at most; a set clock by half its step. */
export type DipDone = { kind: 'now' } | { kind: 'ago'; minutes: 10 | 20 | 40 } | { kind: 'at'; at: number }

const ROUGH_MINUTES: Record<10 | 20 | 40, number> = { 10: 5, 20: 10, 40: 15 }
/** The clock is set in steps of 5 min. */
const SET_CLOCK_ROUGH_MINUTES = 3

/** What stands on the dip sheet: filled in from the recipe, changed by a hand. */
export type DipDraft = {
  treeIds: string[]
  bathId: string
  stucco: Stucco
  way: CoatingWay
  drainSeconds: number
  done: DipDone
  /** Null hangs each tree back where it was. */
  placeId: string | null
  /** As typed from the wall hygrometer. */
  roomTemp: string
  roomHumidity: string
  /** As typed off the scale and the surface thermometer. */
  weight: string
  surfaceTemp: string
  /** For trees that are held or not dry yet. */
  reason: string
  /** The coat of each tree as it stood when the tree was taken up, or as a person has corrected it: 'it was the next one'. */
  coatNumbers: Record<string, number>
}

const NOT_DRY: ReadonlySet<TreeState> = new Set(['wet', 'drying', 'nearly dry', 'unknown', 'last coat on'])

/** True when the newest coat is not known to be dry: the dip would be early. */
export function isEarly(tree: QueueTree): boolean {
  return NOT_DRY.has(tree.state) || tree.warnings.some(({ code }) => code === 'still wet' || code === 'unknown')
}

/** Held or early: the log takes the dip, wants to know why, and tells the supervisor. */
export function needsReason(tree: QueueTree): boolean {
  return tree.state === 'held' || isEarly(tree)
}

const EARLY_REASONS = ['Feels dry', 'Weighed, it is dry', 'Was dipped before I looked', 'The pour cannot wait']
const HELD_REASONS = ['Patched, goes on', 'Supervisor said so', 'Was dipped before I looked']

/** What the sheet asks before a dip that is early, held, or both, and what its key then says. */
export type ReasonAsk = { question: string; presets: string[]; keyWithReason: (dips: string) => string; keyWithout: string }

/** The question for the trees of a run that need a reason; null when none does. A hold outweighs a wet coat on the key. */
export function reasonAsk(trees: readonly QueueTree[]): ReasonAsk | null {
  const hasHeld = trees.some((tree) => tree.state === 'held')
  const hasEarly = trees.some(isEarly)
  if (hasHeld) {
    return {
      question: hasEarly ? 'Why although held, and before it is dry?' : 'Why although it is held?',
      presets: hasEarly ? [...new Set([...HELD_REASONS, ...EARLY_REASONS])] : HELD_REASONS,
      keyWithReason: (dips) => `Log ${dips} although held`,
      keyWithout: 'It is done: log although held',
    }
  }
  if (!hasEarly) return null
  return {
    question: 'Why before it is dry?',
    presets: EARLY_REASONS,
    keyWithReason: (dips) => `Log ${dips} as early`,
    keyWithout: 'It is done: log as early dip',
  }
}

const TAGS_NAMED = 3

/** Tags in a sentence: 'T-1, T-2, T-3 and 4 more'. */
export function tagsWords(tags: readonly string[]): string {
  const named = tags.slice(0, TAGS_NAMED).join(', ')
  return tags.length > TAGS_NAMED ? `${named} and ${tags.length - TAGS_NAMED} more` : named
}

/** What the recipes say to do before the dip, each line once; where lines differ each begins with the tags it is for. */
export function readAloudLines(trees: readonly QueueTree[]): string[] {
  const tagsOf = new Map<string, string[]>()
  for (const { next, tag } of trees) {
    if (next?.readAloud) tagsOf.set(next.readAloud, [...(tagsOf.get(next.readAloud) ?? []), tag])
  }
  const lines = [...tagsOf]
  return lines.length > 1 ? lines.map(([line, tags]) => `${tagsWords(tags)}: ${line}`) : lines.map(([line]) => line)
}

/** The sheet as the recipe and the tree's last place fill it in. Null when the first tree takes no coat. */
export function startDraft(trees: readonly QueueTree[]): DipDraft | null {
  const first = trees.find((tree) => tree.next !== null)
  if (!first?.next) return null
  const empty: DipDraft = {
    treeIds: [],
    bathId: first.next.bathId,
    stucco: first.next.stucco,
    way: 'dip',
    drainSeconds: first.next.drainSeconds,
    done: { kind: 'now' },
    placeId: null,
    weight: '',
    surfaceTemp: '',
    roomTemp: '',
    roomHumidity: '',
    reason: '',
    coatNumbers: {},
  }
  return trees.filter((tree) => tree.next !== null).reduce(withTree, empty)
}

/**
 * The draft with one more tree. Its coat number stands from now on: when another tablet logs that coat meanwhile, this dip must not
 * slip to the next number by itself but be asked about.
 */
export function withTree(draft: DipDraft, tree: QueueTree): DipDraft {
  const number = tree.next?.number ?? tree.coatsOn + 1
  return { ...draft, treeIds: [...draft.treeIds, tree.id], coatNumbers: { ...draft.coatNumbers, [tree.id]: number } }
}

/** Whether a kept draft is the run that is begun now: the same trees for the same coats. */
export function isSameRun(kept: DipDraft, fresh: DipDraft): boolean {
  return kept.treeIds.join() === fresh.treeIds.join() && fresh.treeIds.every((id) => kept.coatNumbers[id] === fresh.coatNumbers[id])
}

/** Trees whose coat of this draft is not on yet. The others were logged meanwhile: the server says by whom. */
export function stillToDip(draft: DipDraft, trees: readonly QueueTree[]): QueueTree[] {
  return trees.filter((tree) => coatNumberOf(draft, tree) > tree.coatsOn)
}

/** The coat that a tree gets by this draft. */
export function coatNumberOf(draft: DipDraft, tree: QueueTree): number {
  return draft.coatNumbers[tree.id] ?? tree.next?.number ?? tree.coatsOn + 1
}

/** Which of the sheet's choices differ from the recipe of at least one tree. */
export type Deviations = { bath: boolean; stucco: boolean }

/** Which of the draft's choices differ from the recipe of at least one of the trees. */
export function deviationsOf(draft: DipDraft, trees: readonly QueueTree[]): Deviations {
  return {
    bath: trees.some((tree) => tree.next !== null && tree.next.bathId !== draft.bathId),
    stucco: trees.some((tree) => tree.next !== null && tree.next.stucco !== draft.stucco),
  }
}

/** Stuccos to choose from: 'none' only where the next coat is a seal. */
export function stuccoChoices(trees: readonly QueueTree[]): Stucco[] {
  const grades: Stucco[] = ['fine', 'medium', 'coarse']
  return trees.some((tree) => tree.next?.kind === 'seal' || tree.next?.stucco === 'none') ? [...grades, 'none'] : grades
}

/** True when one of the chosen places has no sensor, so that somebody has to read the wall hygrometer. */
export function needsWallReading(draft: DipDraft, trees: readonly QueueTree[], places: Queue['places']): boolean {
  const chosen = draft.placeId === null ? trees.map((tree) => tree.place.id) : [draft.placeId]
  return places.some((place) => place.needsTypedReading && chosen.includes(place.id))
}

/** '19,5' and '19.5' are the same dial. Null when nothing was typed, NaN when it is no number. */
function parseDial(text: string): number | null {
  const trimmed = text.trim().replace(',', '.').replace('−', '-')
  return trimmed === '' ? null : Number(trimmed)
}

export type DialErrors = { airTempC?: string; relHumidityPct?: string }

/** What is wrong with a temperature that was typed, with the limits in the unit it was typed in; null when nothing is. */
function tempProblem(typed: number | null, unit: TempUnit): string | null {
  if (typed === null || !Number.isFinite(typed)) return `Temperature is a number in ${UNIT_SIGNS[unit]}.`
  const celsius = readTyped(typed, unit)
  const { least, most } = AIR_TEMP_LIMITS_C
  if (celsius < least) return `A shell room is not colder than ${typedWords(least, unit)}.`
  return celsius > most ? `A shell room is not hotter than ${typedWords(most, unit)}.` : null
}

/** Checks what was typed from the wall hygrometer against what air can be. The dial is read in `unit`; the room comes back in °C. */
export function checkDial(
  temp: string,
  humidity: string,
  unit: TempUnit,
): { errors: DialErrors; room: { airTempC: number; relHumidityPct: number } | null } {
  const errors: DialErrors = {}
  const typedTemp = parseDial(temp)
  const typedHumidity = parseDial(humidity)
  const problem = tempProblem(typedTemp, unit)
  const problemOfHumidity = humidityProblem(typedHumidity)
  if (problem !== null) errors.airTempC = problem
  if (problemOfHumidity !== null) errors.relHumidityPct = problemOfHumidity
  const room =
    typedTemp !== null && problem === null && typedHumidity !== null && problemOfHumidity === null
      ? { airTempC: readTyped(typedTemp, unit), relHumidityPct: typedHumidity }
      : null
  return { errors, room }
}

/** When the dip was made, epoch milliseconds, and the half width of a rough time in minutes. */
function dippedAtOf(done: DipDone, now: number): { dippedAt: number; roughTime?: number } {
  if (done.kind === 'now') return { dippedAt: now }
  if (done.kind === 'ago') return { dippedAt: now - done.minutes * MINUTE_MS, roughTime: ROUGH_MINUTES[done.minutes] }
  return { dippedAt: Math.min(done.at, now), roughTime: SET_CLOCK_ROUGH_MINUTES }
}

export type RunBody = Omit<DipRun, 'operationId'>

/** The body of the run. The room goes along only when it was read from the wall. */
export function runBody(
  draft: DipDraft,
  trees: readonly QueueTree[],
  now: number,
  room: { airTempC: number; relHumidityPct: number } | null,
): RunBody {
  const reason = draft.reason.trim()
  return {
    bathId: draft.bathId,
    stucco: draft.stucco,
    way: draft.way,
    drainSeconds: draft.drainSeconds,
    ...dippedAtOf(draft.done, now),
    ...(room ? { room } : {}),
    trees: trees.map((tree) => ({
      treeId: tree.id,
      coatNumber: coatNumberOf(draft, tree),
      placeId: draft.placeId ?? tree.place.id,
      ...(reason !== '' && needsReason(tree) ? { reason } : {}),
    })),
  }
}

/** Places to offer as keys beside the last one: the next ones along the rack. */
export function nearPlaces(places: Queue['places'], trees: readonly QueueTree[], count: number): Queue['places'] {
  const last = trees[0]?.place.id
  const index = places.findIndex((place) => place.id === last)
  const taken = new Set(trees.map((tree) => tree.place.id))
  return [...places.slice(index + 1), ...places.slice(0, Math.max(0, index))].filter((place) => !taken.has(place.id)).slice(0, count)
}

/** 'Back to Rack B 2, B 3, B 4': the shared beginning is said once. */
export function backToWords(trees: readonly QueueTree[]): string {
  const names = [...new Set(trees.map((tree) => tree.place.name))]
  if (names.length <= 1) return names[0] ?? ''
  const start = names[0]!.split(' ').slice(0, -2).join(' ')
  const canShorten = start !== '' && names.every((name) => name.startsWith(`${start} `))
  const short = canShorten ? names.map((name, index) => (index === 0 ? name : name.slice(start.length + 1))) : names
  return short.length > 4 ? `Back to their ${short.length} places` : `Back to ${short.join(', ')}`
}
