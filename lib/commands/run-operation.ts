import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { sha256Hex } from '@/lib/core/ids'
import { inTransaction, Operation } from '@/models'

export type OperationAnswer = { status: number; response: Record<string, unknown> }

export type OperationInput = {
  /** Made by the client once per intent and kept through every retry. */
  operationId: string
  kind: string
  memberId: string
  /** The parsed body; the same id with another one is refused. */
  body: unknown
  clock: Clock
}

/** JSON with the keys of every object in order, so that equal bodies give equal text. */
function canonicalJson(value: unknown): string {
  return JSON.stringify(value, (_key, inner: unknown) =>
    inner !== null && typeof inner === 'object' && !Array.isArray(inner)
      ? Object.fromEntries(Object.entries(inner).toSorted(([left], [right]) => (left < right ? -1 : 1)))
      : inner,
  )
}

/**
 * Does a write once, however often it is sent: the effect and the answer are stored in one transaction under the operation id.
 * Only successes are kept; a refused write may be sent again under its id.
 *
 * @returns the answer of this run, or the stored one with `replayed: true`.
 * @throws {AppError} unprocessable when the id was used for something else.
 */
export function runOperation(
  { operationId, kind, memberId, body, clock }: OperationInput,
  work: () => Promise<OperationAnswer>,
): Promise<OperationAnswer & { replayed: boolean }> {
  const bodyHash = sha256Hex(canonicalJson(body))
  return inTransaction(async () => {
    const stored = await Operation.findByPk(operationId)
    if (stored) {
      if (stored.bodyHash !== bodyHash || stored.kind !== kind || stored.memberId !== memberId) {
        throw new AppError('unprocessable', 'This operation id was used before for something else.', { operationId })
      }
      return { status: stored.status, response: stored.response, replayed: true }
    }
    const answer = await work()
    await Operation.create({ operationId, kind, memberId, bodyHash, ...answer, createdAt: clock.now() })
    return { ...answer, replayed: false }
  })
}
