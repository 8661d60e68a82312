import { z } from 'zod'

export const SENSOR_KINDS = ['logger', 'wall hygrometer'] as const
export type SensorKind = (typeof SENSOR_KINDS)[number]

/** The kinds of sensor as somebody chooses them. */
export const SENSOR_KIND_WORDS: Record<SensorKind, string> = {
  logger: 'A logger that sends its readings',
  'wall hygrometer': 'We read the wall hygrometer',
}

const name = z.string().trim().min(1, 'Name the sensor.').max(60, 'A name has at most 60 letters.')

/** A new sensor. Its kind stands: readings of one kind hold longer than those of the other. */
export const sensorInput = z.strictObject({ name, kind: z.enum(SENSOR_KINDS, 'Choose the kind of sensor.') })
export type SensorInput = z.infer<typeof sensorInput>

/** Another name for a known one. */
export const sensorRename = z.strictObject({ name })
export type SensorRename = z.infer<typeof sensorRename>
