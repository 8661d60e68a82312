'use server'

import { z } from 'zod'
import { answerFields, answerSettings } from '@/app/(office)/settings/answer-settings'
import { bathInput } from '@/lib/coats/bath-input'
import { changeBath, createBath, retireBath, reuseBath } from '@/lib/commands/save-bath'
import { systemClock as clock } from '@/lib/core/clock'
import { formText } from '@/lib/format/form-text'
import { requireMember } from '@/lib/server/auth'
import type { FormState } from '@/lib/server/form-state'

const bathIdInput = z.uuid()
const readBath = (form: FormData) => bathInput.safeParse({ name: formText(form, 'name'), kind: formText(form, 'kind') })

export async function addBathAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('baths')
  return answerFields(readBath(form), async (input) => {
    await createBath(input, { member, clock })
    return `${input.name} is added.`
  })
}

export async function changeBathAction(bathId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('baths')
  return answerFields(readBath(form), async (input) => {
    await changeBath(bathIdInput.parse(bathId), input, { member, clock })
    return `${input.name} is saved.`
  })
}

export async function retireBathAction(bathId: string): Promise<FormState> {
  const member = await requireMember('baths')
  return answerSettings(async () => {
    await retireBath(bathIdInput.parse(bathId), { member, clock })
    return 'Retired.'
  })
}

export async function reuseBathAction(bathId: string): Promise<FormState> {
  const member = await requireMember('baths')
  return answerSettings(async () => {
    await reuseBath(bathIdInput.parse(bathId), { member, clock })
    return 'In use again.'
  })
}
