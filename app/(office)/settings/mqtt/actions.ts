'use server'

import { z } from 'zod'
import { answerFields, answerSettings } from '@/app/(office)/settings/answer-settings'
import { saveMqttBroker } from '@/lib/commands/save-mqtt-broker'
import { addMqttTopic, changeMqttTopic, removeMqttTopic } from '@/lib/commands/save-mqtt-topic'
import { systemClock as clock } from '@/lib/core/clock'
import { brokerInput, readBrokerForm } from '@/lib/mqtt/broker-input'
import { readTopicForm, topicInput } from '@/lib/mqtt/topic-input'
import { requireMember } from '@/lib/server/auth'
import type { FormState } from '@/lib/server/form-state'

const topicIdInput = z.uuid()

export async function saveBrokerAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('settings')
  return answerFields(brokerInput.safeParse(readBrokerForm(form)), async (input) => {
    await saveMqttBroker(input, { member, clock })
    return input.isOn ? 'Saved. The worker connects within a few seconds.' : 'Saved. Kilnward does not listen.'
  })
}

export async function addTopicAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('sensors')
  return answerFields(topicInput.safeParse(readTopicForm(form)), async (input) => {
    await addMqttTopic(input, { member, clock })
    return `${input.filter} is added.`
  })
}

export async function changeTopicAction(topicId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('sensors')
  return answerFields(topicInput.safeParse(readTopicForm(form)), async (input) => {
    await changeMqttTopic(topicIdInput.parse(topicId), input, { member, clock })
    return `${input.filter} is saved.`
  })
}

export async function removeTopicAction(topicId: string): Promise<FormState> {
  const member = await requireMember('sensors')
  return answerSettings(async () => {
    await removeMqttTopic(topicIdInput.parse(topicId), { member, clock })
    return 'Removed.'
  })
}
