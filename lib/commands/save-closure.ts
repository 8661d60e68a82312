import { addFoundryEvent } from '@/lib/commands/foundry-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { changedFields } from '@/lib/members/changed-fields'
import type { ClosureInput } from '@/lib/schedule/closure-input'
import { Closure, inTransaction } from '@/models'

type By = { member: Actor; clock: Clock }

/** Adds days on which nobody dips. They may touch or overlap others. */
export function addClosure(input: ClosureInput, { member, clock }: By): Promise<{ closureId: string }> {
  return inTransaction(async () => {
    const now = clock.now()
    const closureId = newId(now)
    await Closure.create({ ...input, id: closureId, createdAt: now })
    await addFoundryEvent(
      { type: 'closure', id: closureId, name: input.name },
      { kind: 'closed days added', by: member, at: now, text: `Closed days added: ${input.name}.`, after: input },
    )
    return { closureId }
  })
}

/** Changes closed days. @throws {AppError} not_found. */
export function changeClosure(closureId: string, input: ClosureInput, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const closure = await knownClosure(closureId)
    const { name, firstDay, lastDay } = closure
    const changed = changedFields({ name, firstDay, lastDay }, input)
    if (Object.keys(changed.after).length === 0) return
    await closure.update(input)
    await addFoundryEvent(
      { type: 'closure', id: closureId, name: input.name },
      { kind: 'closed days changed', by: member, at: clock.now(), text: `Closed days changed: ${input.name}.`, ...changed },
    )
  })
}

/** Opens closed days again. @throws {AppError} not_found. */
export function removeClosure(closureId: string, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const closure = await knownClosure(closureId)
    const { name, firstDay, lastDay } = closure
    await closure.destroy()
    await addFoundryEvent(
      { type: 'closure', id: closureId, name },
      {
        kind: 'closed days removed',
        by: member,
        at: clock.now(),
        text: `Closed days removed: ${name}.`,
        before: { name, firstDay, lastDay },
      },
    )
  })
}

async function knownClosure(closureId: string): Promise<Closure> {
  const closure = await Closure.findByPk(closureId)
  if (!closure) throw new AppError('not_found', 'These closed days are not in the calendar any more.')
  return closure
}
