import { millisecondsInDay, millisecondsInMinute } from 'date-fns/constants'
import { DEMO_AIRS, demoAirAt, type DemoAir, type DemoClimate } from '@/lib/demo/climate'
import { READING_EVERY_MS, type DemoReading } from '@/lib/demo/drying-room'
import { DEMO_LOGGERS } from '@/lib/demo/shop'

/** The door takes no older rows; a little less, because a request takes its time. */
const FURTHEST_BACK_MS = 31 * millisecondsInDay - 10 * millisecondsInMinute

/** The air that a logger of the demo hangs in, by the name it was given, with whatever was put behind it; null for any other. */
export const airOfLogger = (name: string): DemoAir | null => DEMO_AIRS.find((air) => name.startsWith(DEMO_LOGGERS[air])) ?? null

/**
 * What a demo logger has still to send: the five-minute rows that it missed, 31 days at most, and this minute's.
 *
 * @param newestAt its newest row; null when it never sent one.
 */
export function feedRows(climate: DemoClimate, air: DemoAir, { newestAt, now }: { newestAt: number | null; now: number }): DemoReading[] {
  const thisMinute = Math.floor(now / millisecondsInMinute) * millisecondsInMinute
  const after = Math.max(newestAt ?? 0, now - FURTHEST_BACK_MS)
  const rows: DemoReading[] = []
  for (let at = (Math.floor(after / READING_EVERY_MS) + 1) * READING_EVERY_MS; at < thisMinute; at += READING_EVERY_MS) {
    rows.push({ measuredAt: at, ...demoAirAt(climate, air, at) })
  }
  if (thisMinute > after) rows.push({ measuredAt: thisMinute, ...demoAirAt(climate, air, thisMinute) })
  return rows
}
