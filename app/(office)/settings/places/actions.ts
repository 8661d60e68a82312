'use server'

import { z } from 'zod'
import { answerFields, answerSettings } from '@/app/(office)/settings/answer-settings'
import { changePlace, createPlace, retirePlace, reusePlace } from '@/lib/commands/save-place'
import { systemClock as clock } from '@/lib/core/clock'
import { formText } from '@/lib/format/form-text'
import { placeChange, placeInput, readPlaceForm } from '@/lib/room/place-input'
import { requireMember } from '@/lib/server/auth'
import type { FormState } from '@/lib/server/form-state'

const placeIdInput = z.uuid()

export async function addPlaceAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('places')
  return answerFields(placeInput.safeParse(readPlaceForm(form)), async (input) => {
    await createPlace(input, { member, clock })
    return `${input.name} is added.`
  })
}

export async function changePlaceAction(placeId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('places')
  const changed = placeChange.safeParse({ ...readPlaceForm(form), since: formText(form, 'since') })
  return answerFields(changed, async ({ since, ...input }) => {
    await changePlace(placeIdInput.parse(placeId), input, since, { member, clock })
    return `${input.name} is saved.`
  })
}

export async function retirePlaceAction(placeId: string): Promise<FormState> {
  const member = await requireMember('places')
  return answerSettings(async () => {
    await retirePlace(placeIdInput.parse(placeId), { member, clock })
    return 'Retired.'
  })
}

export async function reusePlaceAction(placeId: string): Promise<FormState> {
  const member = await requireMember('places')
  return answerSettings(async () => {
    await reusePlace(placeIdInput.parse(placeId), { member, clock })
    return 'In use again.'
  })
}
