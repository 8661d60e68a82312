import type { z } from 'zod'
import type { ErrorCode } from '@/lib/core/errors'
import type { Act } from '@/lib/members/roles'

/** What a door answers when all is well. Without a schema the answer has no body; `type` is its media type, JSON unless it says so. */
export type DoorAnswer = {
  text: string
  schema?: z.ZodType
  type?: string
  example?: unknown
  headers?: Readonly<Record<string, string>>
}

/**
 * One method of one route, as the API's description tells it. The problems that follow from `who`, `body` and `limit` are added by
 * themselves; `problems` names those that the command behind the door can answer.
 */
export type DoorDescription = {
  /** Unique and stable: programs are generated from it. */
  operationId: string
  method: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE'
  /** As OpenAPI writes it: '/api/v1/trees/{treeId}/holds'. */
  path: string
  group: (typeof DOOR_GROUPS)[number]['name']
  /** A few words. */
  summary: string
  /** Plain sentences, Markdown. */
  text: string
  /** Anybody, a sensor with its token, or a signed-in member who may do this act. */
  who: 'anybody' | 'sensor' | Act
  /** Every {parameter} of the path. */
  params?: Readonly<Record<string, { schema: z.ZodType; text: string }>>
  /** Words of the query and headers of the request that change the answer. */
  query?: Readonly<Record<string, { schema: z.ZodType; text: string }>>
  headers?: Readonly<Record<string, { schema: z.ZodType; text: string }>>
  /** `type` is its media type, JSON unless it says so. */
  body?: { schema: z.ZodType; example: unknown; largestBytes?: number; type?: string }
  /** By status. */
  answers: Readonly<Record<number, DoorAnswer>>
  problems?: readonly ErrorCode[]
  /** Members that the 409 problem of this door has beside the usual ones. */
  conflict?: z.ZodObject
  limit?: { requests: number; per: string }
}

export const DOOR_GROUPS = [
  { name: 'Readings', description: 'Temperature and humidity of the rooms.' },
  { name: 'Floor', description: 'What stands on the floor now, and what is done to it.' },
  { name: 'Notices', description: 'Push notices on the devices of a member.' },
  { name: 'Program', description: 'Kilnward itself.' },
] as const
