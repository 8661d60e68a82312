'use server'

import { revalidatePath } from 'next/cache'
import { z } from 'zod'
import { releaseTrees, withdrawRelease } from '@/lib/commands/release-trees'
import { systemClock } from '@/lib/core/clock'
import { requireMember } from '@/lib/server/auth'
import { answerForm, type FormState } from '@/lib/server/form-state'
import { fieldErrors } from '@/lib/trees/tree-form-values'
import { CONFIRMATIONS, reasonInput } from '@/lib/trees/tree-input'

const releaseForm = z.object({
  treeIds: z.array(z.uuid()).min(1, 'Tick the trees to release.').max(60, 'At most 60 trees go at once.'),
  confirmations: z.record(z.uuid(), z.enum(CONFIRMATIONS)),
})

/** Releases the ticked trees, all or none. The command checks each of them again. */
export async function releaseAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('release')
  const treeIds = form.getAll('tree')
  const parsed = releaseForm.safeParse({
    treeIds,
    confirmations: Object.fromEntries(
      treeIds.flatMap((id) => {
        const confirmation = typeof id === 'string' ? form.get(`confirmation.${id}`) : null
        return confirmation === null || confirmation === '' ? [] : [[id, confirmation]]
      }),
    ),
  })
  if (!parsed.success) return { status: 'refused', text: parsed.error.issues[0]?.message ?? 'Tick the trees to release.' }
  return answerForm(async () => {
    const confirmations = Object.fromEntries(parsed.data.treeIds.map((id) => [id, parsed.data.confirmations[id] ?? null]))
    await releaseTrees(parsed.data.treeIds, { confirmations }, { member, clock: systemClock })
    revalidatePath('/', 'layout')
    return { status: 'done', text: parsed.data.treeIds.length === 1 ? '1 tree released.' : `${parsed.data.treeIds.length} trees released.` }
  })
}

export async function withdrawReleaseAction(treeId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('release')
  const parsed = z.object({ reason: reasonInput }).safeParse({ reason: form.get('reason') ?? '' })
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerForm(async () => {
    await withdrawRelease(z.uuid().parse(treeId), parsed.data.reason, { member, clock: systemClock })
    revalidatePath('/', 'layout')
    return { status: 'done', text: 'Release taken back.' }
  })
}
