'use server'

import { answerFields } from '@/app/(office)/settings/answer-settings'
import { saveFoundry } from '@/lib/commands/save-foundry'
import { systemClock as clock } from '@/lib/core/clock'
import { foundryInput, readFoundryForm } from '@/lib/foundry/foundry-input'
import { requireMember } from '@/lib/server/auth'
import type { FormState } from '@/lib/server/form-state'

export async function saveFoundryAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('settings')
  const { shown, values } = readFoundryForm(form)
  return answerFields(foundryInput(shown).safeParse(values), async (input) => {
    await saveFoundry(input, { member, clock })
    return 'The settings are saved.'
  })
}
