'use server'

import { revalidatePath } from 'next/cache'
import { redirect } from 'next/navigation'
import { editTree } from '@/lib/commands/save-tree'
import { systemClock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { loadTreeDetail } from '@/lib/queries/tree-detail'
import { requireMember } from '@/lib/server/auth'
import { answerForm, type FormState } from '@/lib/server/form-state'
import { fixedFields } from '@/lib/trees/fixed-fields'
import { readTag } from '@/lib/trees/read-tag'
import { fieldErrors, formValuesOf, keepFixed, readTreeForm } from '@/lib/trees/tree-form-values'
import { treeInputIn } from '@/lib/trees/tree-input'

/** Saves a tree and goes back to its page. */
export async function editTreeAction(tag: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('trees')
  return answerForm(async () => {
    // Bound to the form, but sent by the browser like any field.
    const known = readTag(tag)
    const detail = known === null ? null : await loadTreeDetail({ tag: known, viewer: member, clock: systemClock })
    if (detail === null) throw new AppError('not_found', 'There is no such tree.')
    const values = keepFixed(readTreeForm(form), formValuesOf(detail, member.units.mass), fixedFields(detail.tree.coatsOn))
    const parsed = treeInputIn(member.units.mass).safeParse(values)
    if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
    await editTree(detail.tree.id, parsed.data, { member, clock: systemClock })
    revalidatePath('/', 'layout')
    redirect(`/trees/${encodeURIComponent(detail.tree.tag)}`)
  })
}
