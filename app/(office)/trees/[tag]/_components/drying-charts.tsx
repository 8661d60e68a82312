'use client'

import {
  Area,
  CartesianGrid,
  ComposedChart,
  Line,
  LineChart,
  ReferenceDot,
  ReferenceLine,
  ResponsiveContainer,
  XAxis,
  YAxis,
} from 'recharts'
import { useUnits } from '@/app/_components/units-context'
import { formatClock, formatDate, formatMoment } from '@/lib/format/local-time'
import { timePairWords } from '@/lib/format/time-pair'
import { fromSi, oneDecimal, UNIT_SIGNS, wholeNumber } from '@/lib/format/units'
import { curveRows, evenBounds, hourTicks, thinOut } from '@/lib/trees/curve-series'
import type { TreeDetail } from '@/lib/trees/detail-contract'

export type DryingChartsProps = {
  curve: NonNullable<TreeDetail['curve']>
  climate: TreeDetail['climate']
  coatNumber: number
  isLastCoat: boolean
  /** Share of the coat's water left now, as the rest of the page says it. */
  moistureRatio: number | null
  now: number
  timeZone: string
}

const GRID = { stroke: 'var(--rule)', strokeWidth: 1, vertical: false } as const
const TICK = { fill: 'var(--soot)', fontSize: 13, fontFamily: 'var(--font-text), sans-serif' } as const
const LABEL = { fontSize: 14, fontWeight: 600, fontFamily: 'var(--font-text), sans-serif' } as const
const MARGIN = { top: 8, bottom: 0, left: 0 } as const
/** At the right end of the room's lines stand their newest values. */
const VALUE_ROOM = 76
const STALE_MS = 30 * 60_000
const NOW_LINE = { stroke: 'var(--ink)', strokeWidth: 3 } as const
const DAY_MS = 86_400_000

type Spot = { cx?: number; cy?: number }

/** A marker on the target line with its words on a leader above: open for likely, solid for safe. */
function markerShape(words: string, isSafe: boolean, lift: number, anchor: 'start' | 'middle' | 'end') {
  return function Marker({ cx = 0, cy = 0 }: Spot) {
    const shift = anchor === 'end' ? 8 : anchor === 'start' ? -8 : 0
    return (
      <g>
        <path d={`M${cx} ${cy - 16}V${cy - lift + 6}`} stroke="var(--ink)" strokeWidth="1.2" />
        <path
          d={`M${cx - 8} ${cy - 17}h16l-8 14z`}
          fill={isSafe ? 'var(--ink)' : 'var(--paper)'}
          stroke="var(--ink)"
          strokeWidth="2"
          strokeLinejoin="round"
        />
        <text x={cx + shift} y={cy - lift} textAnchor={anchor} className="chart-words">
          {words}
        </text>
      </g>
    )
  }
}

/** Water left in the newest coat, and the room's air below it on the same hours. */
export function DryingCharts({ curve, climate, coatNumber, isLastCoat, moistureRatio, now, timeZone }: DryingChartsProps) {
  const { temp } = useUnits()
  const rows = curveRows(curve.points)
  const from = rows[0]?.at ?? now
  const to = Math.max(rows.at(-1)?.at ?? now, from + 60_000)
  const domain: [number, number] = [from, to]
  const span = to - from
  const share = (at: number) => (at - from) / span
  // A point outside would stretch the axis, and the hours of the charts would no longer stand below each other.
  const room = climate
    .filter((point) => point.at >= from && point.at <= to)
    .map((point) => ({ at: point.at, airTemp: fromSi(point.airTempC, temp), relHumidityPct: point.relHumidityPct }))
  const newestAt = room.at(-1)?.at ?? null
  // All charts share one axis of time, so all make room.
  const right = newestAt !== null && share(Math.max(newestAt, Math.min(now, to))) > 0.8 ? VALUE_ROOM : 12
  const ticks = hourTicks(from, to, timeZone, 8)
  const tickWords = (at: number) => {
    const clock = formatClock(at, timeZone)
    // Where midnights are on the axis they say the day; the hours between stay short.
    return span > DAY_MS && clock === '00:00' ? formatDate(at, timeZone).replace(/ \w+$/, '') : clock
  }
  const left = moistureRatio === null ? null : moistureRatio * 100
  const pair = { likelyAt: curve.likelyAt, safeAt: curve.safeAt }
  const pairWords = timePairWords(pair, now, timeZone)
  const act = isLastCoat ? 'dried out' : 'dip'
  const likelyShare = curve.likelyAt === null ? 0 : share(curve.likelyAt)
  // Clear of the line of now, and inside the frame.
  const likelyAnchor = likelyShare > 0.82 ? 'end' : likelyShare < 0.3 || Math.abs(likelyShare - share(now)) < 0.16 ? 'start' : 'middle'
  const isInside = (at: number | null): at is number => at !== null && at >= from && at <= to
  const targetWords = `${act} at ${wholeNumber(curve.targetPct)} %`
  const summary = `Drying curve of coat ${coatNumber}: ${left === null ? 'water left not known' : `${wholeNumber(left)} % of the water left now`}; ${targetWords}, ${curve.likelyAt === null ? 'when is not known' : pairWords.text}.`

  return (
    <figure className="charts">
      <div role="img" aria-label={summary}>
        <ResponsiveContainer width="100%" height={310}>
          <ComposedChart data={rows} margin={{ ...MARGIN, right }} accessibilityLayer={false}>
            <CartesianGrid {...GRID} />
            <XAxis
              dataKey="at"
              type="number"
              domain={domain}
              ticks={ticks}
              tickFormatter={tickWords}
              tick={TICK}
              tickLine={false}
              stroke="var(--ink)"
              strokeWidth={1.5}
              height={24}
            />
            <YAxis domain={[0, 100]} ticks={[0, 25, 50, 75, 100]} tick={TICK} tickLine={false} axisLine={false} width={38} />
            <Area
              dataKey="band"
              stroke="var(--wet)"
              strokeWidth={1}
              fill="var(--wet-wash)"
              fillOpacity={1}
              isAnimationActive={false}
              connectNulls={false}
            />
            <ReferenceLine
              y={curve.targetPct}
              stroke="var(--verdigris)"
              strokeWidth={2}
              label={{ value: targetWords, position: 'insideBottomLeft', fill: 'var(--verdigris-ink)', ...LABEL }}
            />
            <Line dataKey="pastPct" stroke="var(--ink)" strokeWidth={2.4} dot={false} isAnimationActive={false} type="monotone" />
            <Line
              dataKey="forecastPct"
              stroke="var(--ink)"
              strokeWidth={2}
              strokeDasharray="6 5"
              dot={false}
              isAnimationActive={false}
              type="monotone"
            />
            {now >= from && now <= to && (
              <ReferenceLine
                x={now}
                {...NOW_LINE}
                label={{
                  value: left === null ? 'now' : `now, ${wholeNumber(left)} % left`,
                  position: share(now) > 0.35 ? 'insideTopRight' : 'insideTopLeft',
                  fill: 'var(--ink)',
                  offset: 10,
                  ...LABEL,
                }}
              />
            )}
            {isInside(curve.likelyAt) && isInside(curve.safeAt) && (
              <ReferenceLine
                segment={[
                  { x: curve.likelyAt, y: curve.targetPct },
                  { x: curve.safeAt, y: curve.targetPct },
                ]}
                stroke="var(--ink)"
                strokeWidth={5}
              />
            )}
            {isInside(curve.likelyAt) && (
              <ReferenceDot
                x={curve.likelyAt}
                y={curve.targetPct}
                shape={markerShape(`likely ${formatMoment(curve.likelyAt, now, timeZone)}`, false, 62, likelyAnchor)}
              />
            )}
            {isInside(curve.safeAt) && (
              <ReferenceDot
                x={curve.safeAt}
                y={curve.targetPct}
                shape={markerShape(
                  `safe ${formatMoment(curve.safeAt, now, timeZone)}`,
                  true,
                  38,
                  share(curve.safeAt) > 0.7 ? 'end' : 'start',
                )}
              />
            )}
          </ComposedChart>
        </ResponsiveContainer>
      </div>
      <p className="chart-title">Room while it dries</p>
      {room.length === 0 ? (
        <p className="text-15 text-soot">No reading since the dip.</p>
      ) : (
        <>
          <RoomChart
            rows={room}
            dataKey="airTemp"
            step={temp === 'degF' ? 4 : 2}
            domain={domain}
            now={now}
            color="var(--wax-ink)"
            format={(value) => `${oneDecimal(value)}\u00A0${UNIT_SIGNS[temp]}`}
            name="Air temperature"
            timeZone={timeZone}
            right={right}
          />
          <RoomChart
            rows={room}
            dataKey="relHumidityPct"
            step={10}
            domain={domain}
            now={now}
            color="var(--wet-ink)"
            dash="4 3"
            format={(value) => `${wholeNumber(value)} % RH`}
            name="Humidity"
            timeZone={timeZone}
            right={right}
            foot={{ ticks, tickWords }}
          />
        </>
      )}
      <figcaption>
        <details>
          <summary>The same as a table</summary>
          <table className="table">
            <thead>
              <tr>
                <th scope="col">Time</th>
                <th scope="col" className="right">
                  Water left
                </th>
                <th scope="col" className="right">
                  Between
                </th>
              </tr>
            </thead>
            <tbody>
              {thinOut(curve.points, 13).map((point) => (
                <tr key={point.at}>
                  <th scope="row">
                    {formatMoment(point.at, now, timeZone)}
                    {point.isForecast && <span className="text-soot"> forecast</span>}
                  </th>
                  <td className="right num">{wholeNumber(point.likelyPct)} %</td>
                  <td className="right num">
                    {wholeNumber(Math.min(point.lowPct, point.highPct))} to {wholeNumber(Math.max(point.lowPct, point.highPct))} %
                  </td>
                </tr>
              ))}
            </tbody>
          </table>
        </details>
      </figcaption>
    </figure>
  )
}

function RoomChart({
  rows,
  dataKey,
  step,
  domain,
  now,
  color,
  dash,
  format,
  name,
  timeZone,
  right,
  foot,
}: {
  /** Temperatures in the unit of the reader. */
  rows: { at: number; airTemp: number; relHumidityPct: number }[]
  dataKey: 'airTemp' | 'relHumidityPct'
  step: number
  domain: [number, number]
  now: number
  color: string
  dash?: string
  format: (value: number) => string
  name: string
  timeZone: string
  /** Room at the right for the value. */
  right: number
  foot?: { ticks: number[]; tickWords: (at: number) => string }
}) {
  const values = rows.map((row) => row[dataKey])
  const bounds = evenBounds(values, step)
  const newest = rows.at(-1)!
  const isStale = now - newest.at > STALE_MS && newest.at < domain[1]
  const value = format(newest[dataKey])
  const height = foot ? 96 : 74
  return (
    <div
      role="img"
      aria-label={`${name}: ${format(Math.min(...values))} to ${format(Math.max(...values))}, newest ${format(newest[dataKey])}.`}
    >
      <ResponsiveContainer width="100%" height={height}>
        <LineChart data={rows} margin={{ ...MARGIN, right }} accessibilityLayer={false}>
          <CartesianGrid {...GRID} />
          <XAxis
            dataKey="at"
            type="number"
            domain={domain}
            hide={!foot}
            ticks={foot?.ticks}
            tickFormatter={foot?.tickWords}
            tick={TICK}
            tickLine={false}
            stroke="var(--ink)"
            strokeWidth={1.5}
            height={24}
          />
          <YAxis domain={bounds} ticks={bounds} tick={TICK} tickLine={false} axisLine={false} width={38} />
          <Line
            dataKey={dataKey}
            stroke={color}
            strokeWidth={2.4}
            strokeDasharray={dash}
            dot={false}
            isAnimationActive={false}
            type="monotone"
          />
          {now >= domain[0] && now <= domain[1] && <ReferenceLine x={now} {...NOW_LINE} />}
          <ReferenceDot
            x={isStale ? newest.at : Math.min(Math.max(newest.at, now), domain[1])}
            y={newest[dataKey]}
            r={0}
            label={{
              value: isStale ? `${value} at ${formatMoment(newest.at, now, timeZone)}` : value,
              // Words of a stale value are long: they stand over the line's end, inside the plate.
              position: isStale ? 'top' : 'right',
              fill: color,
              offset: 10,
              ...LABEL,
            }}
          />
        </LineChart>
      </ResponsiveContainer>
    </div>
  )
}
