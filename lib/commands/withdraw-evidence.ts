import { runOperation } from '@/lib/commands/run-operation'
import { settleCoat } from '@/lib/commands/settle-coat'
import { addTreeEvent } from '@/lib/commands/tree-event'
import { UNDO_MS } from '@/lib/coats/undo-window'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import type { Actor } from '@/lib/members/actor'
import { may } from '@/lib/members/roles'
import { deriveFloor } from '@/lib/queries/floor'
import { loadFacts } from '@/lib/queries/load-facts'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { evidenceWords } from '@/lib/trees/evidence-words'
import { clockStart } from '@/lib/trees/facts'
import { Evidence, Member } from '@/models'

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
    const author = await Member.findByPk(evidence.memberId, { rejectOnEmpty: true })
    await addTreeEvent(evidence.treeId, 'evidence withdrawn', {
      by: member,
      at: now,
      text: `Withdrawn: ${evidenceWords(evidence)}, by ${author.name}${reason ? ` (${reason})` : ''}.`,
      ...(evidence.coatId === null ? {} : { coatId: evidence.coatId }),
    })
    await settleAnew(evidence, now)
    return { status: 200, response: { evidenceId, treeId: evidence.treeId } }
  })
}

/** The covered coats that it spoke of: its own, and the next one, whose mass below it may have been. */
async function settleAnew({ treeId, coatId }: Evidence, now: number): Promise<void> {
  const [facts] = await loadFacts({ ids: [treeId] })
  if (!facts) return
  const number = facts.coats.find((coat) => coat.id === coatId)?.number ?? 0
  const touched = facts.coats.filter((coat) => coat.coveredAt !== null && (coat.number === number || coat.number === number + 1))
  if (touched.length === 0) return
  const { context } = await deriveFloor(await loadFoundry(), [facts], now, touched.map(clockStart))
  for (const coat of touched) await settleCoat(facts, coat, context)
}
