'use server'

import { revalidatePath } from 'next/cache'
import { redirect } from 'next/navigation'
import { createTree } from '@/lib/commands/save-tree'
import { systemClock } from '@/lib/core/clock'
import { requireMember } from '@/lib/server/auth'
import { answerForm, type FormState } from '@/lib/server/form-state'
import { fieldErrors, readTreeForm } from '@/lib/trees/tree-form-values'
import { treeInputIn } from '@/lib/trees/tree-input'

/** Adds a tree and goes to its page, where the intake waits. */
export async function createTreeAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('trees')
  const parsed = treeInputIn(member.units.mass).safeParse(readTreeForm(form))
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerForm(async () => {
    const { tag } = await createTree(parsed.data, { member, clock: systemClock })
    revalidatePath('/', 'layout')
    redirect(`/trees/${encodeURIComponent(tag)}`)
  })
}
