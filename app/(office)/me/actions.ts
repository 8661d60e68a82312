'use server'

import { revalidatePath } from 'next/cache'
import { z } from 'zod'
import { endOtherSessions, endOwnSession } from '@/lib/commands/end-own-sessions'
import { saveOwnUnits } from '@/lib/commands/save-own-units'
import { systemClock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { ownUnits } from '@/lib/members/own-units'
import { requireMember } from '@/lib/server/auth'
import { answerForm, type FormState } from '@/lib/server/form-state'
import { fieldErrors } from '@/lib/trees/tree-form-values'

/** The units one reads and types in. */
export async function saveUnitsAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('see')
  const parsed = ownUnits.safeParse({
    tempUnit: form.get('tempUnit'),
    massUnit: form.get('massUnit'),
    lengthUnit: form.get('lengthUnit'),
  })
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerForm(async () => {
    await saveOwnUnits(parsed.data, { member, clock: systemClock })
    revalidatePath('/', 'layout')
    return { status: 'done', text: 'Saved: every page shows them now.' }
  })
}

/** Ends one of one's own sessions. */
export async function endSessionAction(sessionId: string, _previous: FormState, _form: FormData): Promise<FormState> {
  const member = await requireMember('see')
  return answerForm(async () => {
    // Bound to the form, but sent by the browser like any field.
    const parsed = z.uuid().safeParse(sessionId)
    if (!parsed.success) throw new AppError('not_found', 'There is no such session.')
    await endOwnSession(parsed.data, { member, clock: systemClock })
    revalidatePath('/me')
    return { status: 'done', text: 'Ended.' }
  })
}

/** Ends every session of one's own but this one. */
export async function endOtherSessionsAction(_previous: FormState, _form: FormData): Promise<FormState> {
  const member = await requireMember('see')
  return answerForm(async () => {
    await endOtherSessions({ member, clock: systemClock })
    revalidatePath('/me')
    return { status: 'done', text: 'Only this one is left.' }
  })
}
