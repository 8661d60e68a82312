import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { estimateAnswer, type EstimateAnswer } from '@/lib/drying/estimate-contract'
import { DOSE_TOLERANCE, MOISTURE_TOLERANCE, TIME_TOLERANCE_H, WORKED_DAYS, workedBody, WORKED_START } from '@/tests/factories/worked-days'
import { signIn, type Client } from '@/tests/setup/client'
import { seedMember, startServer, type TestServer } from '@/tests/setup/server'
import { estimateBody } from '@/tests/unit/drying/build-estimate'

let server: TestServer
let crew: Client

beforeAll(async () => {
  server = await startServer()
  const { buildFoundry } = await import('@/tests/factories/shell-room')
  await buildFoundry()
  const member = await seedMember('crew')
  crew = await signIn(server.baseUrl, member.email, member.password)
})
afterAll(() => server.stop())

const DOOR = '/api/v1/drying/estimate'

async function estimate(body: Record<string, unknown>): Promise<EstimateAnswer> {
  const response = await crew.send('POST', DOOR, body)
  expect(response.status).toBe(200)
  return estimateAnswer.parse(await response.json())
}

const isWithin = (actual: number, expected: number, tolerance: number) => Math.abs(actual - expected) < tolerance
const hours = (at: number | null) => (at === null ? NaN : (at - WORKED_START) / 3_600_000)

// Constructed cases, recomputed independently: see worked-days.
describe.each(WORKED_DAYS)('POST /api/v1/drying/estimate: $name', (day) => {
  it('has the doses, the water left and the times of the worked day', async () => {
    const { points, dry } = await estimate(workedBody(day))
    const misses = day.doses.flatMap((expected, index) => {
      const { dose, moistureRatio } = points[index]!
      return [
        ['likely', dose.likely / expected.likely, 1, DOSE_TOLERANCE] as const,
        ['low', dose.low / (expected.low ?? dose.low), 1, DOSE_TOLERANCE] as const,
        ['high', dose.high / (expected.high ?? dose.high), 1, DOSE_TOLERANCE] as const,
        ['water', moistureRatio.likely, expected.moistureRatio ?? moistureRatio.likely, MOISTURE_TOLERANCE] as const,
      ].filter(([, actual, wanted, tolerance]) => !isWithin(actual, wanted, tolerance))
    })
    expect(misses).toEqual([])
    const found = { earliest: hours(dry.earliestAt), likely: hours(dry.likelyAt), safe: hours(dry.safeAt) }
    const late = (['earliest', 'likely', 'safe'] as const).filter((which) => {
      const wanted = day.dry[which]
      return wanted !== undefined && !isWithin(found[which], wanted, TIME_TOLERANCE_H)
    })
    expect(late, JSON.stringify(found)).toEqual([])
  })
})

describe('POST /api/v1/drying/estimate', () => {
  it('takes ten thousand readings in any order', async () => {
    const rows = Array.from({ length: 10_000 }, (_, index) => ({ at: WORKED_START + index * 60_000, airTempC: 21, relHumidityPct: 50 }))
    const body = estimateBody({ climate: { readings: rows.toReversed() }, dippedAt: WORKED_START, at: [WORKED_START + 10 * 3_600_000] })
    const { points } = await estimate(body)
    expect(isWithin(points[0]!.dose.likely, 10, 0.01)).toBe(true)
  })

  it.each([
    [
      'a reading from outside a shell room',
      { climate: { readings: [{ at: WORKED_START, airTempC: 210, relHumidityPct: 50 }] } },
      'climate.readings.0.airTempC',
    ],
    ['a need of nothing', { need: { referenceHours: 0 } }, 'need.referenceHours'],
    ['a field that does not belong', { need: { referenceHours: 4, D: 3 } }, 'need'],
  ])('answers %s with a problem document that names the field', async (_what, overrides, path) => {
    const response = await crew.send('POST', DOOR, estimateBody(overrides))
    expect(response.status).toBe(422)
    expect(response.headers.get('content-type')).toContain('application/problem+json')
    const { fields } = (await response.json()) as { fields: { path: string; message: string }[] }
    expect(fields.map((field) => field.path)).toContain(path)
  })

  it('refuses a body past two megabytes', async () => {
    const response = await crew.send('POST', DOOR, { padding: 'x'.repeat(2 * 1024 * 1024) })
    expect(response.status).toBe(413)
  })
})
