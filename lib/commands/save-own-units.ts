import { addFoundryEvent } from '@/lib/commands/foundry-event'
import type { Clock } from '@/lib/core/clock'
import type { Actor } from '@/lib/members/actor'
import { changedFields } from '@/lib/members/changed-fields'
import type { OwnUnits } from '@/lib/members/own-units'
import { inTransaction, Member } from '@/models'

/** The units in which this member reads and types. */
export async function saveOwnUnits(units: OwnUnits, { member, clock }: { member: Actor; clock: Clock }): Promise<void> {
  await inTransaction(async () => {
    const row = await Member.findByPk(member.id, { rejectOnEmpty: true })
    const { tempUnit, massUnit, lengthUnit } = row
    const { before, after } = changedFields({ tempUnit, massUnit, lengthUnit }, units)
    if (Object.keys(after).length === 0) return
    await row.update(units)
    await addFoundryEvent(
      { type: 'member', id: row.id, name: row.name },
      { kind: 'own units changed', by: member, at: clock.now(), text: `${row.name} reads in other units.`, before, after },
    )
  })
}
