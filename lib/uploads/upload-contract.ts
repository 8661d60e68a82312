import { z } from 'zod'
import { DATE_FORMS, uploadSettings } from '@/lib/uploads/upload-settings'
import { UPLOAD_STATES } from '@/lib/uploads/upload-state'

/** The largest file that is taken at once: years of one-minute rows. */
export const LARGEST_UPLOAD_BYTES = 200 * 1024 * 1024

/** Words of the address of `POST /api/v1/uploads`. */
export const uploadQuery = z.object({
  sensorId: z.coerce.number('Choose a sensor.').int('Choose a sensor.').min(1, 'Choose a sensor.').max(1e15, 'Choose a sensor.'),
  fileName: z
    .string()
    .trim()
    .min(1, 'The file has no name.')
    .transform((name) => name.slice(-200)),
})

const repeatOf = z
  .object({ uploadId: z.uuid(), importedAt: z.int() })
  .nullable()
  .describe('An earlier upload of the same file for the same sensor that was imported.')

/** Answer of `POST /api/v1/uploads`. */
export const uploadAnswer = z.object({ uploadId: z.uuid(), sizeBytes: z.int(), sha256: z.string(), repeatOf })
export type UploadAnswer = z.infer<typeof uploadAnswer>

/** Answer of `GET /api/v1/uploads/{uploadId}`: how far it is. */
export const uploadStatus = z.object({
  uploadId: z.uuid(),
  sensorId: z.int(),
  fileName: z.string(),
  state: z.enum(UPLOAD_STATES).describe('`draft` until somebody has said how it is to be read.'),
  sizeBytes: z.int(),
  bytesDone: z.int().describe('Up to here everything is in the readings.'),
  added: z.int(),
  repeated: z.int().describe('Rows of moments at which the sensor had a reading already.'),
  marked: z.int().describe('Rows that are kept and count for nothing: no shell room is like this, or the readings around them deny it.'),
  rejected: z.int().describe('Rows that could not be read.'),
  createdAt: z.int(),
  startedAt: z.int().nullable(),
  finishedAt: z.int().nullable(),
  error: z.string().nullable().describe('Why it has failed.'),
})
export type UploadStatus = z.infer<typeof uploadStatus>

const preview = z.object({
  settings: uploadSettings.describe('How the rows below were read; a guess where none was asked for.'),
  dates: z.enum(['sure', 'ambiguous', 'unread']).describe('`ambiguous`: day and month could be either in every date that was looked at.'),
  dateForms: z.array(z.enum(DATE_FORMS)).describe('Forms that read the dates, the guess first.'),
  columns: z.array(z.object({ name: z.string(), samples: z.array(z.string()) })),
  rows: z.array(
    z.object({
      line: z.int(),
      cells: z.array(z.string()),
      measuredAt: z.int().nullable(),
      airTempC: z.number().nullable(),
      relHumidityPct: z.number().nullable(),
      pressurePa: z.number().nullable(),
      reason: z.string().nullable().describe('Why the row cannot be read, or is kept and not counted.'),
    }),
  ),
  looked: z.int().describe('Rows that were tried, from all over the file.'),
  good: z.int(),
  from: z.int().nullable().describe('The earliest and the latest instant among them.'),
  to: z.int().nullable(),
  reasons: z.array(z.object({ reason: z.string(), count: z.int() })).describe('Why the others cannot be read, the commonest first.'),
})
/** Answer of `GET /api/v1/uploads/{uploadId}/preview`. */
export const uploadPreview = preview
export type UploadPreview = z.infer<typeof uploadPreview>

/** Settings as one word of an address: JSON. Without it the answer is the guess. */
export const previewQuery = z.object({
  settings: z
    .string()
    .max(2000)
    .transform((text, context) => {
      try {
        return JSON.parse(text) as unknown
      } catch {
        context.addIssue({ code: 'custom', message: 'The settings are no JSON.' })
        return z.NEVER
      }
    })
    .pipe(uploadSettings)
    .optional(),
})
