import type { QueueTree } from '@/lib/queue/contract'

/** What Kilnward tells people about. The database keeps the words as they stand here. */
export const NOTICE_KINDS = [
  'coat dry',
  'overdue',
  'last coat on',
  'ready for burnout',
  'room data stale',
  'call withdrawn',
  'deviation',
  'summary',
] as const
export type NoticeKind = (typeof NOTICE_KINDS)[number]

const NOTICE_SUBJECTS = ['coat', 'tree', 'sensor', 'floor', 'member'] as const
export type NoticeSubject = (typeof NOTICE_SUBJECTS)[number]

const MINUTE_S = 60
const HOUR_S = 60 * MINUTE_S

/** How urgent a kind is for the push service, and for how long it is still worth hearing. */
export const NOTICE_CLASS: Record<NoticeKind, { urgency: 'normal' | 'high'; ttlSeconds: number }> = {
  'coat dry': { urgency: 'normal', ttlSeconds: 2 * HOUR_S },
  overdue: { urgency: 'high', ttlSeconds: 4 * HOUR_S },
  'last coat on': { urgency: 'normal', ttlSeconds: 24 * HOUR_S },
  'ready for burnout': { urgency: 'normal', ttlSeconds: 24 * HOUR_S },
  'room data stale': { urgency: 'normal', ttlSeconds: 4 * HOUR_S },
  'call withdrawn': { urgency: 'high', ttlSeconds: 2 * HOUR_S },
  deviation: { urgency: 'high', ttlSeconds: 8 * HOUR_S },
  summary: { urgency: 'normal', ttlSeconds: 2 * HOUR_S },
}

/** Who hears of a notice. */
export type Audience =
  /** Devices set to every tree, and those of members who asked about one of these. */
  | { to: 'trees'; treeIds: readonly string[] }
  /** Whoever was told by an earlier notice, and nobody else. */
  | { to: 'told by'; noticeId: string }
  /** Every device of the members who run the room. */
  | { to: 'supervisors' }

/** One thing, told once per episode: the same kind and subject may open again only after it was closed. */
export type NoticeKey = { kind: NoticeKind; subjectType: NoticeSubject; subjectId: string }

export type NoticeText = { title: string; body: string }

export type NoticeDraft = NoticeKey &
  NoticeText & {
    treeId: string | null
    audience: Audience
    /** When it became true, as far as that is known: a notice that is older than its time to live is not pushed by itself. */
    trueSince: number
    urgency: 'normal' | 'high'
    ttlSeconds: number
  }

export type OpenNotice = NoticeKey & { id: string; treeId: string | null }

export type NoticeClose = { id: string; reason: string }

/** The parts of a tree that a notice speaks of. */
export type NoticeTree = Pick<
  QueueTree,
  'id' | 'tag' | 'title' | 'isDemo' | 'place' | 'next' | 'guard' | 'dry' | 'newestCoat' | 'coatsOn' | 'willMissPour' | 'word'
>

/**
 * Push topic and device tag: one card per tree, so a newer word about it replaces the older one undelivered or on the phone.
 *
 * At most 32 characters of the base64url alphabet, as RFC 8030 wants a topic.
 */
export function pushTag(notice: { kind: string; subjectType: string; subjectId: string; treeId: string | null }): string {
  // What a supervisor must read is not replaced by the next word about the tree.
  if (notice.kind === 'deviation') return compact(notice.subjectId)
  return notice.treeId === null ? compact(`${notice.subjectType}-${notice.subjectId}`) : compact(notice.treeId)
}

function compact(id: string): string {
  return id.replaceAll(/[^A-Za-z0-9_]/g, '').slice(-32)
}
