import type { Job } from '@/jobs/job'
import { issueSensorToken } from '@/lib/commands/issue-sensor-token'
import type { Clock } from '@/lib/core/clock'
import { env } from '@/lib/core/env'
import { airOfLogger, feedRows } from '@/lib/demo/feed-rows'
import { demoClimate } from '@/lib/demo/plan'
import { keepDemoTokens, readDemoTokens, type DemoTokens } from '@/lib/demo/token-file'
import { loadDemoFeed, type DemoFeedState } from '@/lib/queries/demo-feed'

/** Far under what the door takes at once. */
const ROWS_PER_REQUEST = 2000
const PATIENCE_MS = 20_000

export type FeedDemoParts = {
  clock: Clock
  fetch: typeof fetch
  /** Where the program answers, such as http://localhost:3000. */
  baseUrl: string
  tokens: DemoTokens
  isStopping?: () => boolean
}

/**
 * Sends what the demo's sensors have to tell, through the same door as any logger: this minute's reading, and before it the
 * five-minute rows of a pause. Oldest first, so that a pass which fails leaves no hole.
 *
 * @returns how many rows were sent; null where there is no demo, or no longer.
 * @throws {Error} when the door refuses.
 */
export async function feedDemo({ clock, fetch, baseUrl, tokens, isStopping = () => false }: FeedDemoParts): Promise<number | null> {
  const state = await loadDemoFeed()
  if (!state) return null
  const climate = demoClimate(state.startsAt, state.timeZone)
  let sent = 0
  for (const { sensorId, name, token } of tokens) {
    const air = airOfLogger(name)
    const logger = state.loggers.find((candidate) => candidate.sensorId === sensorId)
    if (!air || !logger) continue
    const rows = feedRows(climate, air, { newestAt: logger.newestAt, now: clock.now() })
    for (let first = 0; first < rows.length && !isStopping(); first += ROWS_PER_REQUEST) {
      const readings = rows.slice(first, first + ROWS_PER_REQUEST)
      const response = await fetch(new URL('/api/v1/readings', baseUrl), {
        method: 'POST',
        headers: { authorization: `Bearer ${token}`, 'content-type': 'application/json' },
        body: JSON.stringify({ readings }),
        signal: AbortSignal.timeout(PATIENCE_MS),
      })
      // Removed since this pass began: a pass that finds nothing to feed is as good as done.
      if (response.status === 401 && !(await loadDemoFeed())) return null
      if (!response.ok) throw new Error(`${name}: the door for readings answered ${response.status}.`)
      sent += readings.length
    }
  }
  return sent
}

/** Every minute, while DEMO_FEED is on: the demo's own sensors, in a foundry of its own or laid over another. Elsewhere it does nothing. */
export function demoFeed({ fetch }: { fetch: typeof globalThis.fetch }): Job {
  return {
    name: 'demo-feed',
    schedule: '45 * * * * *',
    run: async ({ clock, isStopping }) => {
      if (env().DEMO_FEED === 'off') return { off: true }
      const state = await loadDemoFeed()
      if (!state) return { demo: false }
      const tokens = (await tokensFor(state)) ?? (await makeTokens(state, clock))
      return { sent: await feedDemo({ clock, fetch, baseUrl: env().NEXTAUTH_URL, tokens, isStopping }) }
    },
  }
}

/** The kept tokens; null when one is missing, as after a restored backup. */
async function tokensFor({ loggers }: DemoFeedState): Promise<DemoTokens | null> {
  const kept = (await readDemoTokens()) ?? []
  const isFed = ({ sensorId, name }: DemoFeedState['loggers'][number]) =>
    airOfLogger(name) === null || kept.some((token) => token.sensorId === sensorId)
  return loggers.every(isFed) ? kept : null
}

/** New tokens for a demo whose file was lost, as after a restored backup. */
async function makeTokens({ loggers }: DemoFeedState, clock: Clock): Promise<DemoTokens> {
  const tokens: DemoTokens = []
  for (const { sensorId, name } of loggers) {
    if (airOfLogger(name) === null) continue
    const { token } = await issueSensorToken({ sensorId }, { member: null, clock })
    tokens.push({ sensorId, name, token })
  }
  await keepDemoTokens(tokens)
  return tokens
}
