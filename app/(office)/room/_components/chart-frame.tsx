import type { ReactNode } from 'react'
import { formatClock, formatDate, formatWeekday } from '@/lib/format/local-time'
import { rangeTicks, type RangeTick, type RoomRange } from '@/lib/room/range'
import { hourTicks } from '@/lib/trees/curve-series'

/** The time that every drawing of the page lies on. */
export type Frame = {
  range: RoomRange
  from: number
  to: number
  now: number
  timeZone: string
  closed: readonly { from: number; to: number }[]
}

/** Where an instant lies, from 0 at the left end to 1 at the right. */
export const shareOf = (frame: Frame, at: number): number => Math.min(1, Math.max(0, (at - frame.from) / (frame.to - frame.from)))

/** The same as a CSS length. */
export const leftOf = (frame: Frame, at: number): string => `${(shareOf(frame, at) * 100).toFixed(3)}%`

const WIDTH = 1000

/** The same in the drawing's own units. */
export const xOf = (frame: Frame, at: number): number => Number((shareOf(frame, at) * WIDTH).toFixed(1))

/**
 * A drawing as wide as the plate: shapes are stretched sideways, words lie above them as text. Closed hours are shaded; the line
 * is now.
 */
export function TimeDrawing({
  frame,
  height,
  label,
  children,
  words,
}: {
  frame: Frame
  height: number
  /** The drawing in a sentence. */
  label: string
  children: ReactNode
  words?: ReactNode
}) {
  return (
    <div className="time-drawing" style={{ height }}>
      <svg viewBox={`0 0 ${WIDTH} ${height}`} preserveAspectRatio="none" role="img" aria-label={label}>
        {frame.closed.map(({ from, to }) => (
          <rect
            key={from}
            x={xOf(frame, from)}
            y="0"
            width={Math.max(0, xOf(frame, to) - xOf(frame, from))}
            height={height}
            className="closed-hours"
          />
        ))}
        {children}
      </svg>
      {words}
      <span className="now-line" style={{ left: leftOf(frame, frame.now) }} aria-hidden="true" />
    </div>
  )
}

/** Hours at the foot of a drawing, and midnight by its day; days of a fortnight, months of a year. */
export function TimeFoot({ frame }: { frame: Frame }) {
  return (
    <div className="time-foot" aria-hidden="true">
      {ticksOf(frame).map(({ at, words, isMajor, day }) => {
        const share = shareOf(frame, at)
        return (
          <span
            key={at}
            style={{ left: leftOf(frame, at) }}
            data-hour={isMajor ? 'major' : 'minor'}
            data-end={share < 0.03 ? 'left' : share > 0.97 ? 'right' : undefined}
          >
            {day === undefined ? words : <b title={day}>{words}</b>}
          </span>
        )
      })}
    </div>
  )
}

function ticksOf(frame: Frame): (RangeTick & { day?: string })[] {
  const { range, from, to, timeZone } = frame
  // A first midnight at the very edge would stand in the words of the second.
  if (range === '14d') return rangeTicks(range, { from, to }, timeZone).filter(({ at }) => shareOf(frame, at) > 0.03)
  if (range === '1y') return rangeTicks(range, { from, to }, timeZone)
  return hourTicks(from, to, timeZone, 8).map((at) => {
    const clock = formatClock(at, timeZone)
    if (clock !== '00:00') return { at, words: clock, isMajor: clock === '12:00' }
    return { at, words: formatWeekday(at, timeZone), isMajor: true, day: formatDate(at, timeZone) }
  })
}
