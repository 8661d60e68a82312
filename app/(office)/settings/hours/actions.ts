'use server'

import { z } from 'zod'
import { answerFields, answerSettings } from '@/app/(office)/settings/answer-settings'
import { addClosure, changeClosure, removeClosure } from '@/lib/commands/save-closure'
import { saveShiftHours } from '@/lib/commands/save-shift-hours'
import { systemClock as clock } from '@/lib/core/clock'
import { closureInput, readClosureForm } from '@/lib/schedule/closure-input'
import { hoursInput, readHoursForm } from '@/lib/schedule/hours-input'
import { requireMember } from '@/lib/server/auth'
import type { FormState } from '@/lib/server/form-state'

const closureIdInput = z.uuid()

export async function saveHoursAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('settings')
  return answerFields(hoursInput.safeParse(readHoursForm(form)), async (hours) => {
    await saveShiftHours(hours, { member, clock })
    return 'The hours are saved.'
  })
}

export async function addClosureAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('settings')
  return answerFields(closureInput.safeParse(readClosureForm(form)), async (input) => {
    await addClosure(input, { member, clock })
    return `${input.name} is added.`
  })
}

export async function changeClosureAction(closureId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('settings')
  return answerFields(closureInput.safeParse(readClosureForm(form)), async (input) => {
    await changeClosure(closureIdInput.parse(closureId), input, { member, clock })
    return `${input.name} is saved.`
  })
}

export async function removeClosureAction(closureId: string): Promise<FormState> {
  const member = await requireMember('settings')
  return answerSettings(async () => {
    await removeClosure(closureIdInput.parse(closureId), { member, clock })
    return 'Removed.'
  })
}
