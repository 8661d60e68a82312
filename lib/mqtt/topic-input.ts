import { z } from 'zod'
import { formText } from '@/lib/format/form-text'
import { TEMP_UNITS } from '@/lib/format/units'
import { readJsonPath } from '@/lib/mqtt/json-path'
import { TIME_FORMS } from '@/lib/mqtt/time-form'
import { topicFilterFault } from '@/lib/mqtt/topic-filter'

const path = z
  .string()
  .trim()
  .max(120, 'A path has at most 120 letters.')
  .refine(
    (text) => text === '' || readJsonPath(text) !== null,
    'A path is written like data.temp, $.probes[0].temp, or $ for the whole message.',
  )
  .transform((text) => (text === '' ? null : text))

/** A topic as typed. An empty path is a figure that the topic does not tell. */
export const topicInput = z
  .strictObject({
    filter: z
      .string()
      .trim()
      .superRefine((text, context) => {
        const fault = topicFilterFault(text)
        if (fault !== null) context.addIssue({ code: 'custom', message: fault })
      }),
    sensorId: z.preprocess((value) => (value === '' ? undefined : Number(value)), z.int('Choose the sensor that it feeds.').positive()),
    tempPath: path,
    rhPath: path,
    pressurePath: path,
    timePath: path,
    batteryPath: path,
    tempUnit: z.enum(TEMP_UNITS, 'Choose a unit.'),
    timeForm: z.enum(TIME_FORMS, 'Choose how it tells the time.'),
  })
  .refine(({ tempPath, rhPath }) => tempPath !== null || rhPath !== null, {
    path: ['tempPath'],
    message: 'Say where the temperature or the humidity stands.',
  })
  .refine(({ timePath, timeForm }) => timeForm === 'arrival' || timePath !== null, {
    path: ['timePath'],
    message: 'Say where the time stands, or choose ‘It does not’.',
  })
  // What is left over in a field that does not count any more is not kept.
  .transform((input) => (input.timeForm === 'arrival' ? { ...input, timePath: null } : input))
export type TopicInput = z.infer<typeof topicInput>

/** The form of a topic as it stands in its fields. */
export type TopicFormValues = Record<keyof TopicInput, string>

/** A stored topic as its form shows it. */
export function topicFormValues(topic: TopicInput): TopicFormValues {
  return {
    filter: topic.filter,
    sensorId: String(topic.sensorId),
    tempPath: topic.tempPath ?? '',
    rhPath: topic.rhPath ?? '',
    pressurePath: topic.pressurePath ?? '',
    timePath: topic.timePath ?? '',
    batteryPath: topic.batteryPath ?? '',
    tempUnit: topic.tempUnit,
    timeForm: topic.timeForm,
  }
}

/** Form fields of a topic. */
export function readTopicForm(form: FormData): TopicFormValues {
  return {
    filter: formText(form, 'filter'),
    sensorId: formText(form, 'sensorId'),
    tempPath: formText(form, 'tempPath'),
    rhPath: formText(form, 'rhPath'),
    pressurePath: formText(form, 'pressurePath'),
    timePath: formText(form, 'timePath'),
    batteryPath: formText(form, 'batteryPath'),
    tempUnit: formText(form, 'tempUnit'),
    timeForm: formText(form, 'timeForm'),
  }
}
