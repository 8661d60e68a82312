import {
  NOTICE_CLASS,
  type NoticeClose,
  type NoticeDraft,
  type NoticeKey,
  type NoticeKind,
  type NoticeText,
  type OpenNotice,
} from '@/lib/notices/notice'
import {
  callWithdrawnText,
  coatDryText,
  lastCoatOnText,
  overdueText,
  readyForBurnoutText,
  roomDataStaleText,
  type TextContext,
} from '@/lib/notices/notice-text'
import type { Queue, QueueTree } from '@/lib/queue/contract'
import type { TreeState } from '@/lib/trees/states'

/** Where the newest coat is dry enough for the next act. */
const DRY_STATES: ReadonlySet<TreeState> = new Set(['dip now', 'waiting', 'dried out'])
/** Where readings say that it is not. */
const WET_STATES: ReadonlySet<TreeState> = new Set(['wet', 'drying', 'nearly dry', 'last coat on'])
const OFF_THE_FLOOR: ReadonlySet<TreeState> = new Set(['scrapped', 'released'])

/** After a notice closed, the same one waits this long to open again: a value that flaps sends one message per dwell. */
export const REOPEN_DWELL_MS = 10 * 60_000

export type NoticeRulesInput = {
  queue: Pick<Queue, 'rooms' | 'places' | 'trees' | 'shift' | 'foundry'>
  open: readonly OpenNotice[]
  /** Notices that closed within the dwell. Older ones are ignored. */
  closed: readonly (NoticeKey & { closedAt: number })[]
  now: number
}

/**
 * What has to be told, and what has ended, as the floor stands now.
 *
 * Level-triggered: it looks at the truth of this moment and at what is open, never at what happened between two passes,
 * so a missed hour, a restart or a second worker comes to the same result. Missing data ends nothing.
 */
export function noticeChanges({ queue, open, closed, now }: NoticeRulesInput): { open: NoticeDraft[]; close: NoticeClose[] } {
  const context: TextContext = { now, timeZone: queue.foundry.timeZone }
  const trees = new Map(queue.trees.map((tree) => [tree.id, tree]))
  const close: NoticeClose[] = []
  const withdrawn: NoticeDraft[] = []
  for (const notice of open) {
    const tree = notice.treeId === null ? undefined : trees.get(notice.treeId)
    const reason = endOf(notice, tree, queue)
    if (reason === null) continue
    close.push({ id: notice.id, reason })
    if (reason === WITHDRAWN && tree) {
      withdrawn.push(
        toDraft({
          ...ofTree('call withdrawn', 'coat', notice.subjectId, tree, now, () => callWithdrawnText(tree, context)),
          audience: { to: 'told by', noticeId: notice.id },
        }),
      )
    }
  }
  const ending = new Set(close.map(({ id }) => id))
  const taken = new Set(open.filter(({ id }) => !ending.has(id)).map(keyOf))
  const closing = open.filter(({ id }) => ending.has(id)).map(keyOf)
  // A close in the future is one from before the clock was set back.
  const isResting = ({ closedAt }: { closedAt: number }) => closedAt <= now && now - closedAt < REOPEN_DWELL_MS
  const resting = new Set([...closed.filter(isResting).map(keyOf), ...closing])
  const fresh = [...treeCandidates(queue.trees, context), ...roomCandidates(queue, context)]
    .filter((notice) => !taken.has(keyOf(notice)) && !resting.has(keyOf(notice)))
    .map(toDraft)
  // Taking a call back is never held up: somebody may be walking to the rack.
  return { open: [...withdrawn.filter((notice) => !taken.has(keyOf(notice))), ...fresh], close }
}

/** True when a notice has been true for longer than it is worth hearing, as after the worker was down. */
export function isLate(notice: Pick<NoticeDraft, 'trueSince' | 'ttlSeconds'>, now: number): boolean {
  return now - notice.trueSince > notice.ttlSeconds * 1000
}

const WITHDRAWN = 'withdrawn by late data'

/** Why an open notice has ended, or null while it stands. */
function endOf(notice: OpenNotice, tree: QueueTree | undefined, queue: NoticeRulesInput['queue']): string | null {
  if (notice.kind === 'room data stale') return endOfRoom(Number(notice.subjectId), queue)
  if (!tree || OFF_THE_FLOOR.has(tree.state)) return 'the tree left the floor'
  if (notice.subjectType === 'coat' && tree.newestCoat?.id !== notice.subjectId) return 'another coat is the newest'
  if (tree.state === 'held' && (notice.kind === 'coat dry' || notice.kind === 'overdue')) return 'held'
  return isUnknown(tree) ? null : (END_OF_KIND[notice.kind]?.(tree) ?? null)
}

/** What readings and people can end. A deviation and a summary are told and closed at once. */
const END_OF_KIND: Partial<Record<NoticeKind, (tree: QueueTree) => string | null>> = {
  'coat dry': ({ state }) => (WET_STATES.has(state) ? WITHDRAWN : null),
  overdue: ({ state }) => (state === 'overdue' ? null : 'not overdue any more'),
  'last coat on': ({ next }) => (next === null ? null : 'another coat is to come'),
  'ready for burnout': ({ state }) => (state === 'ready for burnout' ? null : 'not ready any more'),
  'call withdrawn': ({ state }) => (WET_STATES.has(state) ? null : 'the coat is not drying any more'),
}

function endOfRoom(sensorId: number, queue: NoticeRulesInput['queue']): string | null {
  const room = queue.rooms.find((candidate) => candidate.sensorId === sensorId)
  if (!room) return 'the sensor was retired'
  if (!room.isStale) return 'readings are back'
  return treesOfSensor(sensorId, queue).length === 0 ? 'no tree waits for it' : null
}

/** No usable reading: a shell with its last coat on keeps its state and only warns. */
function isUnknown(tree: QueueTree): boolean {
  return tree.state === 'unknown' || tree.warnings.some(({ code }) => code === 'unknown')
}

/** What is true now; the words are only made for what has to be told. */
type Candidate = Omit<NoticeDraft, 'title' | 'body' | 'urgency' | 'ttlSeconds'> & { text: () => NoticeText }

function toDraft({ text, ...candidate }: Candidate): NoticeDraft {
  return { ...candidate, ...text(), ...NOTICE_CLASS[candidate.kind] }
}

function treeCandidates(trees: readonly QueueTree[], context: TextContext): Candidate[] {
  const { now } = context
  return trees.flatMap((tree) => {
    const { newestCoat, state, stateSince } = tree
    if (!newestCoat || OFF_THE_FLOOR.has(state)) return []
    const found: Candidate[] = []
    if (DRY_STATES.has(state)) {
      found.push(ofTree('coat dry', 'coat', newestCoat.id, tree, stateSince ?? now, () => coatDryText(tree, context)))
    }
    if (state === 'overdue') {
      // A pour date is lost at this moment, whenever the coat was dry.
      const since = tree.willMissPour ? now : (stateSince ?? now)
      found.push(ofTree('overdue', 'coat', newestCoat.id, tree, since, () => overdueText(tree, stateSince, context)))
    }
    if (tree.next === null) {
      found.push(ofTree('last coat on', 'coat', newestCoat.id, tree, newestCoat.dippedAt, () => lastCoatOnText(tree, context)))
    }
    if (state === 'ready for burnout') {
      found.push(ofTree('ready for burnout', 'tree', tree.id, tree, stateSince ?? now, () => readyForBurnoutText(tree)))
    }
    return found
  })
}

function roomCandidates(queue: NoticeRulesInput['queue'], context: TextContext): Candidate[] {
  return queue.rooms.flatMap((room): Candidate[] => {
    if (!room.isStale) return []
    // A wall hygrometer is read by a person; nobody is there to read it outside the shift.
    if (room.isTypedOnly && !queue.shift.isOpen) return []
    const trees = treesOfSensor(room.sensorId, queue)
    if (trees.length === 0) return []
    return [
      {
        kind: 'room data stale',
        subjectType: 'sensor',
        subjectId: String(room.sensorId),
        treeId: null,
        audience: { to: 'trees', treeIds: trees.map(({ id }) => id) },
        // Silence has no moment; it is worth saying for as long as it lasts.
        trueSince: context.now,
        text: () => roomDataStaleText(room, trees.length, context),
      },
    ]
  })
}

/** Trees with a coat on, hanging where this sensor measures. */
function treesOfSensor(sensorId: number, queue: NoticeRulesInput['queue']): QueueTree[] {
  const places = new Set(queue.places.filter((place) => place.sensorId === sensorId).map(({ id }) => id))
  return queue.trees.filter((tree) => tree.newestCoat && !OFF_THE_FLOOR.has(tree.state) && places.has(tree.place.id))
}

function ofTree(
  kind: NoticeKind,
  subjectType: 'coat' | 'tree',
  subjectId: string,
  tree: QueueTree,
  trueSince: number,
  text: () => NoticeText,
): Candidate {
  return { kind, subjectType, subjectId, treeId: tree.id, audience: { to: 'trees', treeIds: [tree.id] }, trueSince, text }
}

function keyOf({ kind, subjectType, subjectId }: NoticeKey): string {
  return `${kind}\n${subjectType}\n${subjectId}`
}
