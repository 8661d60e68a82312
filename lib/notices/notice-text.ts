import { formatMoment } from '@/lib/format/local-time'
import type { NoticeText, NoticeTree } from '@/lib/notices/notice'
import { saidWords } from '@/lib/trees/word'

export type TextContext = { now: number; timeZone: string }

/** A push is read away from the room: there nothing else would say that a tree is made up. */
const named = ({ tag, isDemo }: Pick<NoticeTree, 'tag' | 'isDemo'>): string => (isDemo ? `Demo ${tag}` : tag)

/**
 * The coat may be dipped over. The guard's own time comes first and the other beside it, because a lone minute promises too much.
 *
 * @example coatDryText(tree, context) // => { title: 'T-122 dry: dip 6', body: 'Backup slurry, coarse. Rack B. Otter Gate, panel 2. Safe since 17:10, likely since 16:20.' }
 */
export function coatDryText(tree: NoticeTree, context: TextContext): NoticeText {
  const times = guardTimes(tree, context)
  if (tree.next === null) {
    return { title: `${named(tree)} dried out: look over`, body: sentences('All coats on', tree.place.name, tree.title, times) }
  }
  const guardAt = tree.guard === 'likely' ? tree.dry?.likelyAt : tree.dry?.safeAt
  // A person's word can be ahead of the clock.
  const isByWord = typeof guardAt === 'number' && guardAt > context.now
  const dry = isByWord ? 'felt dry' : tree.guard === 'likely' ? 'likely dry' : 'dry'
  return { title: `${named(tree)} ${dry}: dip ${tree.next.number}`, body: sentences(slurry(tree.next), tree.place.name, tree.title, times) }
}

/** The wet coat's longest wait is over, or the pour date is lost. */
export function overdueText(tree: NoticeTree, since: number | null, context: TextContext): NoticeText {
  const what = tree.next === null ? 'look over' : `dip ${tree.next.number}`
  return {
    title: `${named(tree)} overdue: ${what}`,
    body: sentences(
      tree.next && slurry(tree.next),
      tree.place.name,
      tree.title,
      tree.willMissPour && 'Its pour date is lost',
      since !== null && !tree.willMissPour && `Overdue since ${formatMoment(since, context.now, context.timeZone)}`,
    ),
  }
}

/** Target reached: the last coat of the tree's list is on. */
export function lastCoatOnText(tree: NoticeTree, context: TextContext): NoticeText {
  return {
    title: `${named(tree)} last coat on: ${tree.coatsOn} coats`,
    body: sentences(tree.place.name, tree.title, foreseen(tree, context)),
  }
}

/** Looked over, dry, nothing open: the tree may be released. */
export function readyForBurnoutText(tree: NoticeTree): NoticeText {
  return {
    title: `${named(tree)} ready for burnout`,
    body: sentences(tree.place.name, tree.title, 'Looked over, no open fault, no hold'),
  }
}

/** A 'coat dry' that was told does not hold any more: readings that came late show wetter air. */
export function callWithdrawnText(tree: NoticeTree, context: TextContext): NoticeText {
  const { word } = tree
  return {
    title: `${named(tree)} not dry yet: wait`,
    body: sentences(
      word?.verdict === 'not yet' ? saidWords(word) : 'Late readings show wetter air',
      tree.place.name,
      tree.title,
      foreseen(tree, context),
    ),
  }
}

/** A room without readings: the clocks of its trees stand still. */
export function roomDataStaleText(
  room: { sensorName: string; measuredAt: number | null; relHumidityPct: number | null; isTypedOnly: boolean },
  treeCount: number,
  context: TextContext,
): NoticeText {
  const last =
    room.measuredAt === null
      ? 'No reading yet'
      : `Last reading ${formatMoment(room.measuredAt, context.now, context.timeZone)}${room.relHumidityPct === null ? '' : `, ${Math.round(room.relHumidityPct)} %`}`
  const what = treeCount === 1 ? '1 tree waits for it' : `${treeCount} trees wait for it`
  return {
    title: `${room.sensorName}: no readings`,
    body: sentences(last, what, room.isTypedOnly ? 'Type in a reading' : 'Look at the sensor, or type in a reading'),
  }
}

/** For the supervisor: a dip that went on early, held or otherwise not as the recipe says. */
export function deviationText(dip: {
  tag: string
  title: string
  placeName: string
  coatNumber: number
  deviations: readonly string[]
  reason: string | null
}): NoticeText {
  return {
    title: `${dip.tag}: dip ${dip.coatNumber} not as planned`,
    body: sentences(...dip.deviations.slice(0, 4), dip.reason !== null && `Reason: ${dip.reason}`, dip.placeName, dip.title),
  }
}

/** One word for everything that was missed while nobody watched, instead of a burst. */
export function summaryText(late: readonly NoticeText[]): NoticeText {
  const [only] = late
  if (only && late.length === 1) return { title: only.title, body: only.body }
  const shown = late.slice(0, 8).map((notice) => notice.title)
  const rest = late.length - shown.length
  return {
    title: `${late.length} notices from before`,
    body: sentences(...shown, rest > 0 && `${rest} more on the floor list`),
  }
}

/** Answer to 'Send a test'. */
export function testText(): NoticeText {
  return { title: 'Kilnward test', body: 'This device hears of the shell room.' }
}

function slurry(next: NonNullable<NoticeTree['next']>): string {
  return `${next.bathName}, ${next.stucco === 'none' ? 'no stucco' : next.stucco}`
}

/** 'Safe since 17:10, likely since 16:20', or for a likely guard 'Likely since 16:20, safe from 17:10'. */
function guardTimes(tree: NoticeTree, context: TextContext): string | null {
  const safe = moment('safe', tree.dry?.safeAt ?? null, context)
  const likely = moment('likely', tree.dry?.likelyAt ?? null, context)
  return capital((tree.guard === 'likely' ? [likely, safe] : [safe, likely]).filter((time) => time !== null).join(', '))
}

function foreseen(tree: NoticeTree, context: TextContext): string | null {
  return capital(
    [['likely', tree.dry?.likelyAt ?? null] as const, ['safe', tree.dry?.safeAt ?? null] as const]
      .filter((time): time is readonly ['likely' | 'safe', number] => time[1] !== null)
      .map(([word, at]) => `${word} ${formatMoment(at, context.now, context.timeZone)}`)
      .join(', '),
  )
}

function moment(word: 'likely' | 'safe', at: number | null, { now, timeZone }: TextContext): string | null {
  if (at === null) return null
  return `${word} ${at <= now ? 'since' : 'from'} ${formatMoment(at, now, timeZone)}`
}

function capital(text: string): string | null {
  return text === '' ? null : text.charAt(0).toUpperCase() + text.slice(1)
}

/** Longest body: with title and addresses the payload stays far under what every push service takes. */
const BODY_LIMIT = 300

function sentences(...parts: (string | null | false)[]): string {
  const text = parts
    .filter((part): part is string => typeof part === 'string' && part !== '')
    .map((part) => (/[.?!]$/.test(part) ? part : `${part}.`))
    .join(' ')
  return text.length <= BODY_LIMIT ? text : `${text.slice(0, BODY_LIMIT - 1).trimEnd()}…`
}
