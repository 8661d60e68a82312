import { z } from 'zod'
import type { DoorDescription } from '@/lib/server/doors/door'
import { LARGEST_UPLOAD_BYTES, uploadAnswer, uploadPreview, uploadStatus } from '@/lib/uploads/upload-contract'

const uploadId = { uploadId: { schema: z.string(), text: 'Id of the upload.' } }

export const UPLOAD_DOORS: readonly DoorDescription[] = [
  {
    operationId: 'bringFile',
    method: 'POST',
    path: '/api/v1/uploads',
    group: 'Readings',
    summary: 'A file of readings of any age',
    text: 'The file as it is, in any of the forms that loggers write. It is kept as a draft: nothing of it counts until somebody has looked at the preview on the page of uploads and said how it is to be read. A draft that nobody goes on with is put away after a day.',
    who: 'sensors',
    query: {
      sensorId: { schema: z.int(), text: 'Number of the sensor that measured it.' },
      fileName: { schema: z.string(), text: 'Its name, as people know it.' },
    },
    body: {
      type: 'text/csv',
      schema: z.string(),
      largestBytes: LARGEST_UPLOAD_BYTES,
      example: 'time,temperature,humidity\n2026-10-13T13:05:00Z,21.4,52\n',
    },
    answers: { 201: { text: 'The file is here.', schema: uploadAnswer } },
    problems: ['not_found', 'conflict', 'unprocessable', 'invalid_input'],
  },
  {
    operationId: 'readUpload',
    method: 'GET',
    path: '/api/v1/uploads/{uploadId}',
    group: 'Readings',
    summary: 'How far a file is read',
    text: 'A file is read in small pieces beside everything else, so that nobody waits for it. What it has brought so far counts at once.',
    who: 'sensors',
    params: uploadId,
    answers: { 200: { text: 'How it stands.', schema: uploadStatus } },
    problems: ['not_found'],
  },
  {
    operationId: 'previewUpload',
    method: 'GET',
    path: '/api/v1/uploads/{uploadId}/preview',
    group: 'Readings',
    summary: 'How a file would be read',
    text: 'The first rows, and how many of those looked at all over the file are good. Without settings it guesses delimiter, encoding, columns, units, form of the dates and zone. Where day and month could be either, it says so and chooses neither.',
    who: 'sensors',
    params: uploadId,
    query: { settings: { schema: z.string().optional(), text: 'How it is to be read, as JSON: `settings` of an answer, changed.' } },
    answers: { 200: { text: 'The rows as they would be read.', schema: uploadPreview } },
    problems: ['not_found', 'invalid_input'],
  },
  {
    operationId: 'exportUploadErrors',
    method: 'GET',
    path: '/api/v1/uploads/{uploadId}/errors.csv',
    group: 'Readings',
    summary: 'The rows of a file that could not be read',
    text: 'One line for each: its number in the file, the reason, and its cells as they stand there. The first few tens of thousands are listed.',
    who: 'sensors',
    params: uploadId,
    answers: { 200: { text: 'One line for each row that was refused.', type: 'text/csv', schema: z.string() } },
    problems: ['not_found'],
  },
]
