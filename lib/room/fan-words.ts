import { formatMoment } from '@/lib/format/local-time'
import type { PlaceFans } from '@/lib/room/fans-contract'

/**
 * How long the fans of a place stand as they do, and who says so; behind 'on' or 'off'.
 *
 * @example fanReason({ isOn: true, until, said: { at, by: 'Maud' } }, moment)
 * // => 'said by Maud at 16:02, until 18:00, then by the timetable'
 */
export function fanReason({ until, said }: PlaceFans, { now, timeZone }: { now: number; timeZone: string }): string {
  const time = (at: number) => formatMoment(at, now, timeZone)
  if (said === null) return until === null ? 'by the timetable' : `by the timetable, until ${time(until)}`
  const who = `said by ${said.by} at ${time(said.at)}`
  return until === null ? `${who}, until somebody says otherwise` : `${who}, until ${time(until)}, then by the timetable`
}
