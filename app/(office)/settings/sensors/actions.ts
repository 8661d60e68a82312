'use server'

import { revalidatePath } from 'next/cache'
import { z } from 'zod'
import { answerFields, answerSettings } from '@/app/(office)/settings/answer-settings'
import { issueSensorToken } from '@/lib/commands/issue-sensor-token'
import { revokeSensorToken } from '@/lib/commands/revoke-sensor-token'
import { replaceDevice } from '@/lib/commands/replace-device'
import { removeSensorOffset, saveSensorOffset } from '@/lib/commands/save-sensor-offset'
import { createSensor, renameSensor, retireSensor, reuseSensor } from '@/lib/commands/save-sensor'
import { systemClock as clock } from '@/lib/core/clock'
import { env } from '@/lib/core/env'
import { AppError } from '@/lib/core/errors'
import { formText } from '@/lib/format/form-text'
import { deviceForm, offsetForm } from '@/lib/room/sensor-forms'
import { sensorInput, sensorRename } from '@/lib/room/sensor-input'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { requireMember } from '@/lib/server/auth'
import { answerForm, type FormState } from '@/lib/server/form-state'
import { fieldErrors } from '@/lib/trees/tree-form-values'

const sensorIdInput = z.int()
const offsetIdInput = z.uuid()
const tokenIdInput = z.string().max(36)

export async function addSensorAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('sensors')
  const parsed = sensorInput.safeParse({ name: formText(form, 'name'), kind: formText(form, 'kind') })
  return answerFields(parsed, async (input) => {
    await createSensor(input, { member, clock })
    return `${input.name} is added.`
  })
}

export async function renameSensorAction(sensorId: number, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('sensors')
  return answerFields(sensorRename.safeParse({ name: formText(form, 'name') }), async (input) => {
    await renameSensor(sensorIdInput.parse(sensorId), input, { member, clock })
    return `${input.name} is saved.`
  })
}

export async function retireSensorAction(sensorId: number): Promise<FormState> {
  const member = await requireMember('sensors')
  return answerSettings(async () => {
    await retireSensor(sensorIdInput.parse(sensorId), { member, clock })
    return 'Retired.'
  })
}

export async function reuseSensorAction(sensorId: number): Promise<FormState> {
  const member = await requireMember('sensors')
  return answerSettings(async () => {
    await reuseSensor(sensorIdInput.parse(sensorId), { member, clock })
    return 'In use again.'
  })
}

/** What is added to the readings of a sensor, typed as the difference in the member's own unit. */
export async function saveOffsetAction(sensorId: number, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('sensors')
  const { timeZone } = await loadFoundry()
  const names = ['since', 'airTempOffsetK', 'relHumidityOffsetPct', 'note'] as const
  const parsed = offsetForm(member.units.temp, timeZone).safeParse(Object.fromEntries(names.map((name) => [name, formText(form, name)])))
  return answerFields(parsed, async (input) => {
    await saveSensorOffset(sensorIdInput.parse(sensorId), input, { member, clock })
    return 'The offset is entered. Readings that are there already follow in the next minutes.'
  })
}

export async function removeOffsetAction(offsetId: string): Promise<FormState> {
  const member = await requireMember('sensors')
  return answerSettings(async () => {
    await removeSensorOffset(offsetIdInput.parse(offsetId), { member, clock })
    return 'Taken away.'
  })
}

/** Another device under the same sensor; a logger's new token is shown this one time. */
export async function replaceDeviceAction(sensorId: number, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('sensors')
  const { timeZone } = await loadFoundry()
  const names = ['since', 'serial', 'note'] as const
  const parsed = deviceForm(timeZone).safeParse(Object.fromEntries(names.map((name) => [name, formText(form, name)])))
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerForm(async () => {
    const { token } = await replaceDevice(sensorIdInput.parse(sensorId), parsed.data, { member, clock })
    revalidatePath('/', 'layout')
    return { status: 'done', text: 'The new device has taken over.', ...(token !== null && { secret: token }) }
  })
}

/** A new token, for this one time, and the address that takes its readings. */
export type IssuedToken = { status: 'issued'; token: string; address: string } | { status: 'refused'; text: string }

export async function issueTokenAction(sensorId: number): Promise<IssuedToken> {
  const member = await requireMember('sensors')
  try {
    const { token } = await issueSensorToken({ sensorId: sensorIdInput.parse(sensorId) }, { member, clock })
    revalidatePath('/', 'layout')
    return { status: 'issued', token, address: new URL('/api/v1/readings', env().NEXTAUTH_URL).href }
  } catch (error) {
    if (error instanceof AppError) return { status: 'refused', text: error.message }
    throw error
  }
}

export async function revokeTokenAction(tokenId: string): Promise<FormState> {
  const member = await requireMember('sensors')
  return answerSettings(async () => {
    await revokeSensorToken({ tokenId: tokenIdInput.parse(tokenId) }, { member, clock })
    return 'Revoked.'
  })
}
