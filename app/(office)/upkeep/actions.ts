'use server'

import { revalidatePath } from 'next/cache'
import { makeBackup } from '@/lib/commands/make-backup'
import { systemClock } from '@/lib/core/clock'
import { formatBytes } from '@/lib/format/bytes'
import { requireMember } from '@/lib/server/auth'
import { answerForm, type FormState } from '@/lib/server/form-state'

/** Makes a copy of the records now. */
export async function backUpNowAction(): Promise<FormState> {
  const member = await requireMember('upkeep')
  return answerForm(async () => {
    try {
      const { sizeBytes } = await makeBackup('by hand', { member, clock: systemClock })
      return { status: 'done', text: `Backup made, ${formatBytes(sizeBytes)}.` }
    } finally {
      // A failed try belongs on the page, too.
      revalidatePath('/upkeep')
    }
  })
}
