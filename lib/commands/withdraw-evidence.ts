import { runOperation } from '@/lib/commands/run-operation'
import { settleAnew } from '@/lib/commands/settle-anew'
import { addTreeEvent } from '@/lib/commands/tree-event'
import { UNDO_MS } from '@/lib/coats/undo-window'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import type { Actor } from '@/lib/members/actor'
import { may } from '@/lib/members/roles'
import { evidenceWords } from '@/lib/trees/evidence-words'
import { Evidence, Member, Tree } from '@/models'

type WithdrawalInput = { operationId: string; reason?: string | undefined }

/**
 * Withdraws a piece of evidence: it stays in the history and moves nothing any more. On a coat that is covered, what the coat says of the
 * clock is worked out again.
 *
 * @throws {AppError} not_found; conflict when it was withdrawn already; forbidden after ten minutes or for another's (a supervisor may);
 *   unprocessable with `fields` where a reason is missing.
 */
export function withdrawEvidence(evidenceId: string, input: WithdrawalInput, { member, clock }: { member: Actor; clock: Clock }) {
  const { operationId, reason } = input
  return runOperation({ operationId, kind: 'withdraw evidence', memberId: member.id, body: { evidenceId, ...input }, clock }, async () => {
    const now = clock.now()
    const evidence = await Evidence.findByPk(evidenceId)
    if (!evidence) throw new AppError('not_found', 'There is no such evidence.')
    if (evidence.withdrawnAt !== null) throw new AppError('conflict', 'It was withdrawn already.')
    if (!(evidence.memberId === member.id && now - evidence.loggedAt <= UNDO_MS)) {
      if (!may(member.role, 'correct')) {
        throw new AppError('forbidden', 'Ten minutes are over, or somebody else took it: ask a supervisor to withdraw it.')
      }
      if (!reason) {
        const message = 'Say why in a few words.'
        throw new AppError('unprocessable', 'Say why it is withdrawn.', { fields: [{ path: 'reason', message }] })
      }
    }
    await evidence.update({ withdrawnAt: now, withdrawnBy: member.id, withdrawnReason: reason ?? null })
    const isReleased = (await Tree.findByPk(evidence.treeId, { rejectOnEmpty: true })).releasedAt !== null
    const author = await Member.findByPk(evidence.memberId, { rejectOnEmpty: true })
    await addTreeEvent(evidence.treeId, 'evidence withdrawn', {
      by: member,
      at: now,
      text: `Withdrawn: ${evidenceWords(evidence)}, by ${author.name}${reason ? ` (${reason})` : ''}.${isReleased ? ' The tree was released by then: look whether its release rested on it.' : ''}`,
      ...(evidence.coatId === null ? {} : { coatId: evidence.coatId }),
    })
    await settleAnew(evidence.treeId, evidence.coatId, now)
    return { status: 200, response: { evidenceId, treeId: evidence.treeId } }
  })
}
