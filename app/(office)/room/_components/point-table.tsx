import type { ReactNode } from 'react'
import { formatDuration } from '@/lib/format/duration'
import { formatDateOfYear, formatMoment } from '@/lib/format/local-time'
import { formatKelvin, formatPercent, formatShare, formatTemperature, oneDecimal, type TempUnit } from '@/lib/format/units'
import type { Figure, RoomPoint } from '@/lib/room/series'

const KIND_WORDS: Record<RoomPoint['kind'], string> = { day: 'day', hour: 'hour', reading: 'reading', now: 'now', forecast: 'forecast' }

/** Every point that is drawn, as figures. */
export function PointTable({
  points,
  now,
  timeZone,
  tempUnit,
}: {
  points: readonly RoomPoint[]
  now: number
  timeZone: string
  tempUnit: TempUnit
}) {
  // Days from before anybody read this room say nothing.
  const first = points.findIndex((point) => point.readMinutes !== 0)
  const read = first === -1 ? [] : points.slice(first)
  if (read.length === 0) return <p className="text-soot">Nothing has been read yet.</p>
  return (
    <div className="point-table">
      <table className="table">
        <caption className="vh">Climate of the room, every point that is drawn</caption>
        <thead>
          <tr>
            <th scope="col">Time</th>
            <th scope="col">What</th>
            {['Temperature', 'Humidity', 'Dew point', 'Vapour-pressure deficit', 'Drying pull', 'Speed'].map((head) => (
              <th key={head} scope="col" className="right">
                {head}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {read.map((point) => (
            <tr key={`${point.kind}${point.at}`}>
              <th scope="row" className="whitespace-nowrap">
                {point.kind === 'day' ? formatDateOfYear(point.at, timeZone) : formatMoment(point.at, now, timeZone)}
              </th>
              <td className="whitespace-nowrap">
                {KIND_WORDS[point.kind]}
                {point.readMinutes !== null &&
                  (point.readMinutes === 0 ? ', not read' : `, ${formatDuration(point.readMinutes * 60_000)} read`)}
                {point.isTyped && ', typed'}
                {point.isGap && ', readings missing'}
              </td>
              <td className="right num">
                <WithEnds figure={point.kind === 'day' ? point.airTempC : null} format={(value) => formatTemperature(value, tempUnit)}>
                  {formatTemperature(point.airTempC?.likely ?? null, tempUnit)}
                </WithEnds>
              </td>
              <td className="right num">
                <WithEnds figure={point.kind === 'day' ? point.relHumidityPct : null} format={formatPercent}>
                  {formatPercent(point.relHumidityPct?.likely ?? null)}
                </WithEnds>
              </td>
              <td className="right num">{formatTemperature(point.dewPointC, tempUnit)}</td>
              <td className="right num">
                {point.vaporPressureDeficitPa === null ? '–' : `${oneDecimal(point.vaporPressureDeficitPa / 100)}\u00A0hPa`}
              </td>
              <td className="right num">{formatKelvin(point.wetBulbGapK?.likely ?? null, tempUnit)}</td>
              <td className="right num">{formatShare(point.speed?.likely ?? null)}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}

/** A day's mean, and its least and most below. */
function WithEnds({ figure, format, children }: { figure: Figure | null; format: (value: number) => string; children: ReactNode }) {
  return (
    <>
      {children}
      {figure && (
        <span className="block whitespace-nowrap text-soot">
          {format(figure.low)} to {format(figure.high)}
        </span>
      )}
    </>
  )
}
