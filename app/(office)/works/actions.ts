'use server'

import { revalidatePath } from 'next/cache'
import { z } from 'zod'
import { addSection, editWork, renameSection } from '@/lib/commands/save-work'
import { systemClock } from '@/lib/core/clock'
import { requireMember } from '@/lib/server/auth'
import { answerForm, type FormState } from '@/lib/server/form-state'
import { fieldErrors } from '@/lib/trees/tree-form-values'
import { sectionName, workInput } from '@/lib/works/work-input'

const idInput = z.uuid()
const sectionForm = z.object({ name: sectionName })

/** Parses, runs one command, and reads every office page anew: a title stands on trees, in the list and on the floor. */
async function workForm<Input>(parsed: z.ZodSafeParseResult<Input>, run: (input: Input) => Promise<string>): Promise<FormState> {
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerForm(async () => {
    const text = await run(parsed.data)
    revalidatePath('/', 'layout')
    return { status: 'done', text }
  })
}

export async function editWorkAction(workId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('works')
  const parsed = workInput.safeParse({ title: form.get('title') ?? '', editionSize: form.get('editionSize') ?? '' })
  return workForm(parsed, async (input) => {
    await editWork(idInput.parse(workId), input, { member, clock: systemClock })
    return 'Saved.'
  })
}

export async function addSectionAction(workId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('works')
  return workForm(sectionForm.safeParse({ name: form.get('name') ?? '' }), async ({ name }) => {
    await addSection(idInput.parse(workId), name, { member, clock: systemClock })
    return `${name} added.`
  })
}

export async function renameSectionAction(sectionId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('works')
  return workForm(sectionForm.safeParse({ name: form.get('name') ?? '' }), async ({ name }) => {
    await renameSection(idInput.parse(sectionId), name, { member, clock: systemClock })
    return 'Saved.'
  })
}
