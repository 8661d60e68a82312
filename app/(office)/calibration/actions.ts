'use server'

import { revalidatePath } from 'next/cache'
import { z } from 'zod'
import { acceptCoatsInput, acceptFactorInput, readTickedCoats, type AcceptFactorInput } from '@/lib/calibration/calibration-input'
import { acceptFactor, acceptRecipeCoats, goBack } from '@/lib/commands/calibrate'
import { systemClock } from '@/lib/core/clock'
import { requireMember } from '@/lib/server/auth'
import { answerForm, type FormState } from '@/lib/server/form-state'
import { fieldErrors } from '@/lib/trees/tree-form-values'

/** Takes over, or confirms, the ticked coats of a recipe as one new version. */
export async function acceptCoatsAction(recipeId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('calibrate')
  const parsed = acceptCoatsInput.safeParse({
    recipeId,
    follows: form.get('follows') ?? '',
    coats: readTickedCoats(form.getAll('coat')),
    isMovingTrees: form.get('isMovingTrees') === 'yes',
  })
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerForm(async () => {
    const { version, moved, staying } = await acceptRecipeCoats(parsed.data, { member, clock: systemClock })
    revalidatePath('/', 'layout')
    const movedWords = moved.length === 0 ? '' : ` ${moved.length === 1 ? moved[0] : `${moved.length} trees`} moved to it.`
    const stayingWords =
      staying === 0 ? '' : ` ${staying === 1 ? '1 open tree stays' : `${staying} open trees stay`} on an older version until moved.`
    return { status: 'done', text: `Version ${version} is made.${movedWords}${stayingWords}` }
  })
}

/** Takes over a factor of a place or of a recess, as it was shown. */
export async function acceptFactorAction(subject: AcceptFactorInput): Promise<FormState> {
  const member = await requireMember('calibrate')
  const parsed = acceptFactorInput.parse(subject)
  return answerForm(async () => {
    await acceptFactor(parsed, { member, clock: systemClock })
    revalidatePath('/', 'layout')
    const since = parsed.scope === 'place' ? 'from now on' : 'for coats to come'
    return { status: 'done', text: `Taken over: it holds ${since}.` }
  })
}

/** Goes back on what was taken over. */
export async function goBackAction(calibrationId: string): Promise<FormState> {
  const member = await requireMember('calibrate')
  return answerForm(async () => {
    const text = await goBack(z.uuid().parse(calibrationId), { member, clock: systemClock })
    revalidatePath('/', 'layout')
    return { status: 'done', text }
  })
}
