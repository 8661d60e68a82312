import { z } from 'zod'
import { localDay } from '@/lib/format/local-time'
import { startOfLocalDay } from '@/lib/schedule/shifts'
import { readTag } from '@/lib/trees/read-tag'

/** Kilnward itself, as the member of a filter. */
export const NOBODY = 'kilnward'

/** A place between two lines: the line named here is the last one of the page before. */
export type HistoryCursor = { at: number; source: HistorySource; id: number }
/** Of two lines of one moment, the tree's comes later. */
const HISTORY_SOURCES = ['foundry', 'tree'] as const
export type HistorySource = (typeof HISTORY_SOURCES)[number]

export type HistoryFilter = {
  /** A member's id, or NOBODY. */
  memberId: string | null
  tag: string | null
  kind: string | null
  /** Local days, both included. */
  fromDay: string | null
  toDay: string | null
}

const day = z.iso.date()
const member = z.union([z.uuid(), z.literal(NOBODY)])
const kind = z.string().trim().min(1).max(40)
const cursor = z.string().regex(/^\d{1,15}\.(?:foundry|tree)\.\d{1,15}$/)

type Words = Readonly<Record<string, string | string[] | undefined>>

function read<Value>(words: Words, name: string, schema: z.ZodType<Value>): Value | null {
  const word = words[name]
  return schema.safeParse(Array.isArray(word) ? word[0] : word).data ?? null
}

/** The filter in an address. A word that cannot be one is left out. */
export function readHistoryFilter(words: Words): HistoryFilter {
  const tag = read(words, 'tree', z.string().trim().min(1).max(20))
  return {
    memberId: read(words, 'member', member),
    tag: tag === null ? null : (readTag(tag) ?? tag),
    kind: read(words, 'kind', kind),
    fromDay: read(words, 'from', day),
    toDay: read(words, 'to', day),
  }
}

/** Where the page begins; null for the newest lines. */
export function readHistoryCursor(words: Words): HistoryCursor | null {
  const text = read(words, 'before', cursor)
  if (text === null) return null
  const [at, source, id] = text.split('.')
  return { at: Number(at), source: HISTORY_SOURCES.find((each) => each === source) ?? 'tree', id: Number(id) }
}

/**
 * The address of the history with a filter, from a line on.
 *
 * @example historyAddress({ memberId: null, tag: 'T-118', kind: 'held', fromDay: null, toDay: null }) // => '/history?tree=T-118&kind=held'
 */
export function historyAddress(filter: HistoryFilter, before: string | null = null): string {
  const words = Object.entries({
    member: filter.memberId,
    tree: filter.tag,
    kind: filter.kind,
    from: filter.fromDay,
    to: filter.toDay,
    before,
  }).filter((pair): pair is [string, string] => pair[1] !== null)
  return words.length === 0 ? '/history' : `/history?${new URLSearchParams(words)}`
}

const DAY_MS = 86_400_000

/** The instants from which and before which the filter's days lie, epoch milliseconds; an open side is null. */
export function historySpan({ fromDay, toDay }: HistoryFilter, timeZone: string): { from: number | null; before: number | null } {
  return {
    from: fromDay === null ? null : startOfLocalDay(fromDay, timeZone),
    // A day and a half after its start lies in the next day, however long a day with a clock change is.
    before: toDay === null ? null : startOfLocalDay(localDay(startOfLocalDay(toDay, timeZone) + 1.5 * DAY_MS, timeZone), timeZone),
  }
}
