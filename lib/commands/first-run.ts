import { addFoundryEvent } from '@/lib/commands/foundry-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { firstRunStep, missingFor, stepAfter, type FirstRunStep } from '@/lib/foundry/first-run'
import type { Actor } from '@/lib/members/actor'
import { firstRunStock } from '@/lib/queries/first-run'
import { Foundry, inTransaction } from '@/models'

/**
 * Ends a step of the first run, so that it goes on with the next one. A step that was ended before stays so.
 *
 * @throws {AppError} unprocessable while something is missing that later steps need.
 */
export function endFirstRunStep(step: FirstRunStep): Promise<void> {
  return inTransaction(async () => {
    const foundry = await Foundry.findByPk(1, { rejectOnEmpty: true })
    if (firstRunStep(foundry.firstRunStep) !== step) return
    const missing = missingFor(step, await firstRunStock())
    if (missing !== null) throw new AppError('unprocessable', missing)
    await foundry.update({ firstRunStep: stepAfter(step) })
  })
}

/**
 * Ends the first run: from now on every page opens. Without effect when it was ended before.
 *
 * @throws {AppError} unprocessable while a step is open.
 */
export function endFirstRun({ member, clock }: { member: Actor; clock: Clock }): Promise<void> {
  return inTransaction(async () => {
    const foundry = await Foundry.findByPk(1, { rejectOnEmpty: true })
    if (foundry.setUpAt !== null) return
    if (firstRunStep(foundry.firstRunStep) !== 'done') throw new AppError('unprocessable', 'End the other steps first.')
    const now = clock.now()
    await foundry.update({ setUpAt: now })
    await addFoundryEvent(
      { type: 'foundry', name: foundry.name },
      { kind: 'foundry set up', by: member, at: now, text: `${foundry.name} is set up.` },
    )
  })
}
