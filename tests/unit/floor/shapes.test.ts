import { expect, it } from 'vitest'
import { areRefusals, isDipRunAnswer, isQueue, readProblem } from '@/app/(floor)/floor/_queries/shapes'
import { dipRefusal, dipRunAnswer } from '@/lib/coats/dip-contract'
import { queue as queueContract } from '@/lib/queue/contract'
import { humidityProblem } from '@/lib/room/air-limits'
import { relHumidityPct } from '@/lib/room/reading-contract'
import { buildDryTree, buildQueue, NOW } from '@/tests/factories/queue'

const ID = '018f7d1e-7c00-7000-8000-000000000000'
const FOREIGN = [null, 'a page of a proxy', 7, [], {}, { detail: 'no' }]

it('knows a queue from anything else', () => {
  const queue = queueContract.parse(buildQueue({ trees: [buildDryTree()] }))
  expect(isQueue(queue)).toBe(true)
  const halves = [
    { ...queue, trees: null },
    { ...queue, trees: [null] },
    { ...queue, now: '10:00' },
  ]
  for (const value of [...FOREIGN, ...halves]) expect(isQueue(value)).toBe(false)
})

it('knows what was logged, and what was refused, from anything else', () => {
  const coat = { coatId: ID, treeId: ID, tag: 'T-1', number: 1, likelyAt: NOW, safeAt: null, deviations: [] }
  const answer = dipRunAnswer.parse({ operationId: ID, coats: [coat] })
  expect(isDipRunAnswer(answer)).toBe(true)
  for (const value of [...FOREIGN, { ...answer, coats: [{}] }]) expect(isDipRunAnswer(value)).toBe(false)
  const refusal = dipRefusal.parse({
    treeId: ID,
    tag: 'T-1',
    reason: 'coat skipped',
    detail: 'Coat 2 is missing.',
    coatNumber: 3,
    by: null,
    at: null,
  })
  expect(areRefusals([refusal])).toBe(true)
  for (const value of [null, undefined, {}, [{}]]) expect(areRefusals(value)).toBe(false)
})

it('reads a problem document, and makes the best of half of one', () => {
  const fields = [{ path: 'trees', message: 'A run needs at least one tree.' }]
  expect(readProblem({ detail: 'Not so.', fields, trees: [1] })).toEqual({ detail: 'Not so.', fields, trees: [1] })
  expect(readProblem({ fields: [{}] })).toMatchObject({ detail: 'The server refused this.', fields: [] })
  expect(readProblem(null)).toBeNull()
})

it.each([-1, 0, 52, 105, 106, Number.NaN])('the tablet says of %s %% what the door says', (percent) => {
  const parsed = relHumidityPct.safeParse(percent)
  expect(humidityProblem(percent)).toBe(parsed.success ? null : parsed.error.issues[0]?.message)
})
