import { openTree } from '@/lib/commands/open-tree'
import { addTreeEvent } from '@/lib/commands/tree-event'
import type { Clock } from '@/lib/core/clock'
import type { Actor } from '@/lib/members/actor'
import type { IntakeInput } from '@/lib/trees/tree-input'
import { inTransaction } from '@/models'

/**
 * Records the intake of a wax. It is passed once every point is ticked; until then the tree stays bare wax.
 *
 * @returns whether intake is passed now.
 * @throws {AppError} not_found; conflict when the tree has left the floor.
 */
export function passIntake(treeId: string, intake: IntakeInput, { member, clock }: { member: Actor; clock: Clock }): Promise<boolean> {
  return inTransaction(async () => {
    const tree = await openTree(treeId)
    const now = clock.now()
    const isWhole = intake.waxSurface !== null && intake.isWaxAtRoomTemp && intake.isCupFirm && intake.areVentsAndCorePinsIn
    const wasPassed = tree.intakePassedAt !== null
    await tree.update({
      ...intake,
      intakePassedAt: isWhole ? (tree.intakePassedAt ?? now) : null,
      intakePassedBy: isWhole ? (tree.intakePassedBy ?? member.id) : null,
      updatedAt: now,
    })
    if (isWhole !== wasPassed) {
      const text = isWhole
        ? `Intake passed: wax ${intake.waxSurface}, at room temperature, cup firm, vents and core pins in.`
        : 'Intake opened again.'
      await addTreeEvent(treeId, 'intake passed', { by: member, at: now, text })
    }
    return isWhole
  })
}
