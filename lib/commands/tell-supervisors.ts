import { openNotice } from '@/lib/commands/open-notice'
import type { Clock } from '@/lib/core/clock'
import { env } from '@/lib/core/env'
import { NOTICE_CLASS } from '@/lib/notices/notice'
import { deviationText } from '@/lib/notices/notice-text'

export type DeviationInput = {
  coatId: string
  treeId: string
  tag: string
  title: string
  placeName: string
  coatNumber: number
  /** Plain sentences: 'Held', 'Dipped 40 min before it was safe'. */
  deviations: readonly string[]
  reason: string | null
}

/** Tells the supervisors of an early or held dip. Called by the dip's own transaction, so the dip and its notice stand or fall together. */
export async function tellSupervisors(dip: DeviationInput, { clock }: { clock: Clock }): Promise<void> {
  const now = clock.now()
  await openNotice({
    draft: {
      kind: 'deviation',
      subjectType: 'coat',
      subjectId: dip.coatId,
      treeId: dip.treeId,
      audience: { to: 'supervisors' },
      trueSince: now,
      ...deviationText(dip),
      ...NOTICE_CLASS.deviation,
    },
    vapidPublicKey: env().VAPID_PUBLIC_KEY,
    clock,
    isMomentary: true,
  })
}
