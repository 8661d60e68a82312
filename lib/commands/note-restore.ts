import { addFoundryEvent } from '@/lib/commands/foundry-event'
import type { Clock } from '@/lib/core/clock'
import { formatClock, formatDate } from '@/lib/format/local-time'
import { Foundry, inTransaction, Session } from '@/models'

/**
 * Writes into records that were just restored that they were, and from what. Ends every session: one that was ended after
 * the backup would be open again.
 */
export function noteRestore(
  { fileName, backupAt }: { fileName: string; backupAt: number | null },
  { clock }: { clock: Clock },
): Promise<void> {
  return inTransaction(async () => {
    const at = clock.now()
    const foundry = await Foundry.findByPk(1)
    const moment =
      backupAt === null || !foundry ? '' : ` of ${formatDate(backupAt, foundry.timeZone)}, ${formatClock(backupAt, foundry.timeZone)}`
    await Session.update({ endedAt: at }, { where: { endedAt: null } })
    await addFoundryEvent(
      { type: 'backup', name: fileName },
      { kind: 'backup restored', by: null, at, text: `The records were restored from the backup${moment}.`, after: { fileName, backupAt } },
    )
  })
}
