import { formatMoment } from '@/lib/format/local-time'
import { formatKelvin, formatPercent, formatShare, formatTemperature, oneDecimal, type TempUnit } from '@/lib/format/units'
import type { RoomPoint } from '@/lib/room/series'

const KIND_WORDS: Record<RoomPoint['kind'], string> = { hour: 'hour', reading: 'reading', now: 'now', forecast: 'forecast' }

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
  if (points.length === 0) return <p className="text-soot">Nothing has been read yet.</p>
  return (
    <div className="point-table">
      <table className="table">
        <caption className="vh">Climate of the room, hour by hour</caption>
        <thead>
          <tr>
            <th scope="col">Time</th>
            <th scope="col">What</th>
            {['Temperature', 'Humidity', 'Dew point', 'Vapour-pressure deficit', 'Wet-bulb gap', 'Speed'].map((head) => (
              <th key={head} scope="col" className="right">
                {head}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {points.map((point) => (
            <tr key={`${point.kind}${point.at}`}>
              <th scope="row" className="whitespace-nowrap">
                {formatMoment(point.at, now, timeZone)}
              </th>
              <td className="whitespace-nowrap">
                {KIND_WORDS[point.kind]}
                {point.isTyped && ', typed'}
                {point.isGap && ', readings missing'}
              </td>
              <td className="right num">{formatTemperature(point.airTempC?.likely ?? null, tempUnit)}</td>
              <td className="right num">{formatPercent(point.relHumidityPct?.likely ?? null)}</td>
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
