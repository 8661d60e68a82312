import { beforeEach, describe, expect, it, vi } from 'vitest'
import type { Job } from '@/jobs/job'
import { buildQueue, NOW } from '@/tests/factories/queue'

const { runPass } = await import('@/jobs/run-pass')
const { watchFloor } = await import('@/jobs/watch-floor')
const { prune } = await import('@/jobs/prune')
const { JobRun, Notice, Session, SignInWait } = await import('@/models')
const { forgetNotices, makeDryTree, makeMember, makeShop } = await import('@/tests/factories/notices')

const MINUTE_MS = 60_000
const HOUR_MS = 60 * MINUTE_MS
const at = (now: number) => ({ clock: { now: () => now }, isStopping: () => false })
const runs = () => JobRun.findAll({ order: ['tickAt'] })

beforeEach(forgetNotices)

const counting = () => ({ name: 'count', schedule: '0 * * * * *', run: vi.fn<Job['run']>(async () => ({ seen: 1 })) })

describe('runPass', () => {
  it('does a minute once, whichever worker comes first', async () => {
    const job = counting()
    const answers = await Promise.all([runPass(job, at(NOW)), runPass(job, at(NOW + 5)), runPass(job, at(NOW + 59_999))])
    expect(answers.toSorted()).toEqual(['done', 'taken', 'taken'])
    expect(job.run).toHaveBeenCalledTimes(1)
    expect(await runs()).toMatchObject([{ job: 'count', tickAt: NOW, outcome: 'done', detail: { seen: 1 } }])
  })
  it('writes down the minutes that were missed, and runs one pass for them', async () => {
    const job = counting()
    await runPass(job, at(NOW))
    await runPass(job, at(NOW + 7 * MINUTE_MS))
    expect(job.run).toHaveBeenCalledTimes(2)
    expect((await runs())[1]).toMatchObject({ tickAt: NOW + 7 * MINUTE_MS, detail: { missedMinutes: 6 } })
  })
  it('survives a pass that throws, and what follows a failed pass does not run', async () => {
    const after = counting()
    const job: Job = { name: 'fail', schedule: '', run: () => Promise.reject(new Error('no disk')), followedBy: [after] }
    expect(await runPass(job, at(NOW))).toBe('failed')
    expect(after.run).not.toHaveBeenCalled()
    expect(await runs()).toMatchObject([{ outcome: 'failed', detail: { error: 'Error: no disk' } }])
    expect(await runPass(counting(), at(NOW + MINUTE_MS))).toBe('done')
  })
  it('goes on when the clock is set back an hour', async () => {
    const job = counting()
    await runPass(job, at(NOW))
    await runPass(job, at(NOW + HOUR_MS))
    const answers = []
    for (const now of [NOW + 1000, NOW + 2000, NOW + MINUTE_MS]) answers.push(await runPass(job, at(now)))
    expect(answers).toEqual(['done', 'taken', 'done'])
  })
})

describe('watchFloor', () => {
  it('holds sending back for one pass after a jump of the clock, either way', async () => {
    let now = NOW
    let steady = 0
    const held: boolean[] = []
    const job = watchFloor({
      loadQueue: async () => ({ queue: buildQueue() }),
      vapidPublicKey: 'k',
      monotonic: () => steady,
      suspendSending: (isSuspended) => held.push(isSuspended),
      followedBy: [],
    })
    const step = async (wall: number, real: number) => {
      now += wall
      steady += real
      await job.run({ clock: { now: () => now }, isStopping: () => false })
    }
    await step(0, 0)
    await step(MINUTE_MS, MINUTE_MS)
    await step(HOUR_MS, MINUTE_MS)
    await step(MINUTE_MS, MINUTE_MS)
    await step(-HOUR_MS, MINUTE_MS)
    await step(MINUTE_MS, MINUTE_MS)
    // Asleep for an hour: both clocks agree.
    await step(HOUR_MS, HOUR_MS)
    expect(held).toEqual([false, false, true, false, true, false, false])
  })
  it('opens one notice over two passes and a restart, with the clock set back in between', async () => {
    const tree = await makeDryTree(await makeShop())
    const worker = () =>
      watchFloor({
        loadQueue: async () => ({ queue: buildQueue({ trees: [tree] }) }),
        vapidPublicKey: 'k',
        monotonic: () => 0,
        suspendSending: () => {},
        followedBy: [],
      })
    const first = worker()
    for (const now of [NOW, NOW + MINUTE_MS]) await runPass(first, at(now))
    const second = worker()
    for (const now of [NOW + 9 * MINUTE_MS, NOW - HOUR_MS]) await runPass(second, at(now))
    expect(await Notice.count()).toBe(1)
  })
})

describe('prune', () => {
  it('takes away what is old and nothing else', async () => {
    const DAY_MS = 24 * HOUR_MS
    const member = await makeMember()
    for (const days of [1, 13, 15]) await JobRun.create({ job: 'x', tickAt: NOW - days * DAY_MS, startedAt: NOW - days * DAY_MS })
    for (const days of [1, 31]) {
      const endedAt = NOW - days * DAY_MS
      await Session.create({
        id: crypto.randomUUID(),
        memberId: member.id,
        createdAt: endedAt - HOUR_MS,
        expiresAt: endedAt + HOUR_MS,
        endedAt,
      })
    }
    for (const [subject, waitUntil] of Object.entries({ old: NOW - 2 * DAY_MS, running: NOW + HOUR_MS })) {
      await SignInWait.create({ subject, failures: 5, lastFailedAt: NOW - 2 * DAY_MS, waitUntil })
    }
    expect(await prune.run(at(NOW))).toMatchObject({ jobRuns: 1, sessions: 1, waits: 1 })
    expect(await prune.run(at(NOW))).toMatchObject({ jobRuns: 0, sessions: 0, waits: 0 })
  })
})
