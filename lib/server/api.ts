import type { NextRequest } from 'next/server'
import { RateLimiterMemory, type RateLimiterRes } from 'rate-limiter-flexible'
import { stampSensorToken } from '@/lib/commands/stamp-sensor-token'
import { systemClock, type Clock } from '@/lib/core/clock'
import { AppError, notSetUp } from '@/lib/core/errors'
import { log } from '@/lib/core/log'
import type { Act } from '@/lib/members/roles'
import { hasMembers } from '@/lib/queries/has-members'
import { sensorOfToken, type TokenSensor } from '@/lib/queries/sensor-of-token'
import { requireMember, type Member } from '@/lib/server/auth'
import { SENSOR_REQUESTS_PER_MINUTE } from '@/lib/server/limits'
import { requireOwnOrigin } from '@/lib/server/origin'
import { problemOf } from '@/lib/server/problem'
import { processWide } from '@/lib/server/process-wide'

const JSON_TYPE = 'application/json'

type Params = Record<string, string | string[]>
type Call<P extends Params> = { request: NextRequest; params: P; clock: Clock }
type Route<P extends Params> = (request: NextRequest, context: { params: Promise<P> }) => Promise<Response>

const STAMP_EVERY_MS = 60_000
const sensorRequests = processWide('sensor requests', () => new RateLimiterMemory({ points: SENSOR_REQUESTS_PER_MINUTE, duration: 60 }))

/** A route that anybody may call. It must not change anything. */
export function openRoute<P extends Params = Params>(handler: (call: Call<P>) => Promise<Response>): Route<P> {
  return async (request, context) => {
    try {
      const response = await handler({ request, params: await context.params, clock: systemClock })
      if (!response.headers.has('cache-control')) response.headers.set('cache-control', 'no-store')
      return response
    } catch (error) {
      return problemOf(error, request)
    }
  }
}

export type RouteOptions = {
  /** Kind of body, where it is another than JSON. */
  bodyType?: string
}

/**
 * A route for signed-in members who may do `act`. Checks the origin of writes, the session and the right, and the kind of body,
 * in this order, and answers everything thrown as a problem document.
 *
 * @example export const POST = memberRoute('dip', async ({ request, member, clock }) => { … })
 * @example export const GET = memberRoute<{ treeId: string }>('see', async ({ params }) => { … })
 */
export function memberRoute<P extends Params = Params>(
  act: Act,
  handler: (call: Call<P> & { member: Member }) => Promise<Response>,
  { bodyType = JSON_TYPE }: RouteOptions = {},
): Route<P> {
  return openRoute<P>(async (call) => {
    const isRead = call.request.method === 'GET' || call.request.method === 'HEAD'
    if (!isRead) requireOwnOrigin(call.request)
    const member = await requireMember(act)
    requireBodyType(call.request, bodyType)
    return handler({ ...call, member })
  })
}

/**
 * A route for sensors with a bearer token: no cookies, no members. A limited number of requests a minute for each token.
 */
export function sensorRoute<P extends Params = Params>(handler: (call: Call<P> & { sensor: TokenSensor }) => Promise<Response>): Route<P> {
  const route = openRoute<P>(async (call) => {
    requireBodyType(call.request, JSON_TYPE)
    const sensor = await requireSensor(call.request, call.clock)
    return handler({ ...call, sensor })
  })
  return async (request, context) => {
    const response = await route(request, context)
    if (response.status === 401) response.headers.set('www-authenticate', 'Bearer realm="kilnward"')
    return response
  }
}

async function requireSensor(request: NextRequest, clock: Clock): Promise<TokenSensor> {
  const [, token] = /^Bearer +(\S+)$/i.exec(request.headers.get('authorization') ?? '') ?? []
  const sensor = token ? await sensorOfToken(token) : null
  if (!sensor && !(await hasMembers())) throw notSetUp()
  if (!sensor) throw new AppError('unauthenticated', 'Send the token of a sensor in use: Authorization: Bearer kw_…')
  await sensorRequests.consume(sensor.tokenId).catch((refusal: RateLimiterRes) => {
    throw new AppError(
      'too_many_requests',
      `More than ${SENSOR_REQUESTS_PER_MINUTE} requests in a minute. Send several readings at once.`,
      {
        retryAfterSeconds: Math.ceil(refusal.msBeforeNext / 1000),
      },
    )
  })
  if (clock.now() - (sensor.lastUsedAt ?? 0) >= STAMP_EVERY_MS) {
    // Readings count more than the stamp.
    await stampSensorToken(sensor.tokenId, { clock }).catch((error: unknown) => log('sensor-token.stamp-failed', { error: String(error) }))
  }
  return sensor
}

function requireBodyType({ headers }: NextRequest, bodyType: string): void {
  const hasBody = headers.has('transfer-encoding') || Number(headers.get('content-length') ?? 0) > 0
  const [type] = (headers.get('content-type') ?? '').split(';')
  if (hasBody && type?.trim().toLowerCase() !== bodyType) {
    throw new AppError('unsupported_media_type', `The body must be sent as ${bodyType}.`)
  }
}
