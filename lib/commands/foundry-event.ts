import type { Actor } from '@/lib/members/actor'
import { FoundryEvent } from '@/models'

/** What is not a tree and can change. */
export type EventSubject = {
  type: 'foundry' | 'hours' | 'closure' | 'place' | 'bath' | 'sensor' | 'recipe' | 'work' | 'member' | 'backup' | 'demo' | 'mqtt'
  /** Empty where there is only one. */
  id?: string
  /** Its name at this moment. */
  name?: string
}

/**
 * Adds a line to the foundry's history: who changed what, when and from which device. Takes part in the caller's transaction.
 *
 * @param event.kind what happened, in a few plain words ('place changed'); the history is filtered by it.
 * @param event.text what a person reads, one sentence.
 * @param event.isDemo where nobody did it: whether its subject is the demo's, so that the line goes with it. What somebody did is theirs.
 * @param event.before and `after`: only the fields that changed. Never a password, a token or a hash.
 */
export async function addFoundryEvent(
  subject: EventSubject,
  event: {
    kind: string
    by: Actor | null
    at: number
    text: string
    isDemo?: boolean
    before?: Record<string, unknown>
    after?: Record<string, unknown>
  },
): Promise<void> {
  const { kind, by, at, isDemo = false, ...detail } = event
  await FoundryEvent.create({
    kind,
    subjectType: subject.type,
    subjectId: subject.id ?? '',
    subjectName: subject.name ?? '',
    memberId: by?.id ?? null,
    device: by?.device ?? '',
    at,
    detail,
    isDemo: by === null ? isDemo : (by.isDemo ?? false),
  })
}
