import { z } from 'zod'
import type { DoorDescription } from '@/lib/server/doors/door'

/** Answer of `GET /api/health`. */
export const health = z.object({ status: z.enum(['ok', 'degraded']) })

export const PROGRAM_DOORS: readonly DoorDescription[] = [
  {
    operationId: 'readHealth',
    method: 'GET',
    path: '/api/health',
    group: 'Program',
    summary: 'Whether Kilnward is well',
    text: "'degraded' with status 200: pages answer, but the worker that watches the floor has not been heard of for a while.",
    who: 'anybody',
    answers: {
      200: { text: 'The records answer.', schema: health, example: { status: 'ok' } },
      503: { text: 'The records do not answer.', schema: health, example: { status: 'degraded' } },
    },
  },
  {
    operationId: 'downloadNewestBackup',
    method: 'GET',
    path: '/api/v1/backups/newest',
    group: 'Program',
    summary: 'The newest backup as a file',
    text: 'An SQLite database: all the records as they were then. Keep it as safe as the server.',
    who: 'upkeep',
    answers: {
      200: {
        text: 'The file.',
        type: 'application/vnd.sqlite3',
        schema: z.string(),
        headers: { 'Content-Disposition': 'Its name, with the moment at which it was made.' },
      },
    },
    problems: ['not_found'],
  },
  {
    operationId: 'describeApi',
    method: 'GET',
    path: '/api/v1/openapi.json',
    group: 'Program',
    summary: 'This description',
    text: 'OpenAPI 3.1, made from the schemas that the doors themselves check with.',
    who: 'anybody',
    answers: {
      200: {
        text: 'The description.',
        schema: z.looseObject({ openapi: z.string(), info: z.looseObject({ title: z.string(), version: z.string() }) }),
      },
    },
  },
]
