'use server'

import { revalidatePath } from 'next/cache'
import { recordTypedReading } from '@/lib/commands/record-typed-reading'
import { systemClock } from '@/lib/core/clock'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { readingForm } from '@/lib/room/reading-form'
import { requireMember } from '@/lib/server/auth'
import { answerForm, type FormState } from '@/lib/server/form-state'
import { fieldErrors } from '@/lib/trees/tree-form-values'

/** A person types what they read off a hygrometer, in their own unit. */
export async function typedReadingAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('read')
  const { timeZone } = await loadFoundry()
  const names = ['operationId', 'sensorId', 'airTempC', 'relHumidityPct', 'measuredAt'] as const
  const parsed = readingForm(member.units.temp, timeZone).safeParse(Object.fromEntries(names.map((name) => [name, form.get(name) ?? ''])))
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerForm(async () => {
    await recordTypedReading(parsed.data, { member, clock: systemClock })
    revalidatePath('/', 'layout')
    return { status: 'done', text: 'Reading kept.' }
  })
}
