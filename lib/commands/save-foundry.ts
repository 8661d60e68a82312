import { addFoundryEvent } from '@/lib/commands/foundry-event'
import type { Clock } from '@/lib/core/clock'
import type { FoundryInput } from '@/lib/foundry/foundry-input'
import type { Actor } from '@/lib/members/actor'
import { changedFields } from '@/lib/members/changed-fields'
import { Foundry, inTransaction } from '@/models'

/**
 * Changes the foundry's settings. Readings keep the room factor with which they came, so another altitude acts from the next one on;
 * the air at the trees, which is thinner higher up, follows at once.
 */
export function saveFoundry(input: FoundryInput, { member, clock }: { member: Actor; clock: Clock }): Promise<void> {
  return inTransaction(async () => {
    const foundry = await Foundry.findByPk(1, { rejectOnEmpty: true })
    const changed = changedFields(foundry.get({ plain: true }), input)
    if (Object.keys(changed.after).length === 0) return
    await foundry.update(input)
    await addFoundryEvent(
      { type: 'foundry', name: input.name },
      { kind: 'settings changed', by: member, at: clock.now(), text: 'Settings of the foundry changed.', ...changed },
    )
  })
}
