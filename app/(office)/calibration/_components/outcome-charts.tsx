'use client'

import { CartesianGrid, ErrorBar, ReferenceLine, ResponsiveContainer, Scatter, ScatterChart, XAxis, YAxis } from 'recharts'
import { signedDuration } from '@/lib/calibration/calibration-words'
import { formatDate, formatDateOfYear } from '@/lib/format/local-time'
import { oneDecimal, wholeNumber } from '@/lib/format/units'

/** One coat as it is drawn, hours from its stucco. */
export type OutcomePoint = {
  id: string
  tag: string
  number: number
  coveredAt: number
  earliestHours: number
  likelyHours: number
  safeHours: number
  dryHours: number
  errorMinutes: number
  isInside: boolean
}

const GRID = { stroke: 'var(--rule)', strokeWidth: 1 } as const
const TICK = { fill: 'var(--soot)', fontSize: 13, fontFamily: 'var(--font-text), sans-serif' } as const
const AXIS = { tick: TICK, tickLine: false, stroke: 'var(--ink)', strokeWidth: 1.5 } as const
const MARGIN = { top: 8, right: 16, bottom: 4, left: 0 } as const
/** So many coats stand in the table. */
const ROWS_SHOWN = 40

type Mark = { cx?: number; cy?: number }

const InsideMark = ({ cx = 0, cy = 0 }: Mark) => <circle cx={cx} cy={cy} r="4.5" fill="var(--ink)" />
/** Another shape, not another colour alone. */
const OutsideMark = ({ cx = 0, cy = 0 }: Mark) => (
  <path
    d={`M${cx} ${cy - 6.5}L${cx + 6.5} ${cy}L${cx} ${cy + 6.5}L${cx - 6.5} ${cy}Z`}
    fill="var(--paper)"
    stroke="var(--furnace)"
    strokeWidth="2.2"
  />
)

/** The promise at the dip against what came, and the error over time; the same as a table below. */
export function OutcomeCharts({ points, timeZone }: { points: readonly OutcomePoint[]; timeZone: string }) {
  const longest = Math.max(1, ...points.flatMap(({ likelyHours, dryHours, safeHours }) => [likelyHours, dryHours, safeHours]))
  const step = longest > 48 ? 24 : longest > 20 ? 6 : longest > 8 ? 2 : 1
  const end = Math.ceil(longest / step) * step
  const ticks = Array.from({ length: end / step + 1 }, (_, index) => index * step)
  const drawn = points.map((point) => ({
    ...point,
    errorHours: point.errorMinutes / 60,
    band: [point.likelyHours - point.earliestHours, point.safeHours - point.likelyHours],
  }))
  const [inside, outside] = [drawn.filter(({ isInside }) => isInside), drawn.filter(({ isInside }) => !isInside)]
  const furthest = Math.max(1, ...drawn.map(({ errorHours }) => Math.ceil(Math.abs(errorHours))))
  const days = drawn.map(({ coveredAt }) => coveredAt)
  const [from, to] = [Math.min(...days), Math.max(...days)]
  return (
    <div className="outcome-charts">
      <figure>
        <h3>Promised and come</h3>
        <div
          role="img"
          aria-label={`Hours to dry as promised, across, against hours as they came, up, for ${points.length} coats: ${inside.length} lie between P10 and P90.`}
        >
          <ResponsiveContainer width="100%" height={320}>
            <ScatterChart margin={MARGIN} accessibilityLayer={false}>
              <CartesianGrid {...GRID} />
              <XAxis {...AXIS} dataKey="likelyHours" type="number" domain={[0, end]} ticks={ticks} height={24} />
              <YAxis {...AXIS} dataKey="dryHours" type="number" domain={[0, end]} ticks={ticks} width={34} />
              <ReferenceLine
                segment={[
                  { x: 0, y: 0 },
                  { x: end, y: end },
                ]}
                stroke="var(--verdigris)"
                strokeWidth={2}
              />
              <Scatter data={inside} shape={InsideMark} isAnimationActive={false}>
                <ErrorBar dataKey="band" direction="x" width={0} stroke="var(--soot)" strokeWidth={1.2} isAnimationActive={false} />
              </Scatter>
              <Scatter data={outside} shape={OutsideMark} isAnimationActive={false}>
                <ErrorBar dataKey="band" direction="x" width={0} stroke="var(--furnace)" strokeWidth={1.2} isAnimationActive={false} />
              </Scatter>
            </ScatterChart>
          </ResponsiveContainer>
        </div>
        <p className="text-soot">
          Hours from the stucco: across as likely was told at the dip, with P10 to P90 as a line; up as the coat came dry. On the slanted
          line the clock was right. An open diamond lies outside P10 to P90: below the line earlier than told, above it later.
        </p>
      </figure>
      <figure>
        <h3>Error over time</h3>
        <div
          role="img"
          aria-label={`How many hours later than likely each of ${points.length} coats came dry, from the oldest to the newest.`}
        >
          <ResponsiveContainer width="100%" height={320}>
            <ScatterChart margin={MARGIN} accessibilityLayer={false}>
              <CartesianGrid {...GRID} vertical={false} />
              <XAxis
                {...AXIS}
                dataKey="coveredAt"
                type="number"
                domain={from === to ? [from - 86_400_000, to + 86_400_000] : [from, to]}
                ticks={from === to ? [from] : [from, to]}
                tickFormatter={(at: number) => formatDate(at, timeZone)}
                height={24}
                padding={{ left: 40, right: 40 }}
              />
              <YAxis
                {...AXIS}
                dataKey="errorHours"
                type="number"
                domain={[-furthest, furthest]}
                ticks={[-furthest, 0, furthest]}
                tickFormatter={(hours: number) => (hours > 0 ? `+${wholeNumber(hours)}` : hours < 0 ? `−${wholeNumber(-hours)}` : '0')}
                width={34}
              />
              <ReferenceLine y={0} stroke="var(--verdigris)" strokeWidth={2} />
              <Scatter data={inside} shape={InsideMark} isAnimationActive={false} />
              <Scatter data={outside} shape={OutsideMark} isAnimationActive={false} />
            </ScatterChart>
          </ResponsiveContainer>
        </div>
        <p className="text-soot">
          Hours later than likely, by the day on which the coat was covered. Above the line the likely time was early.
        </p>
      </figure>
      <details className="outcome-table">
        <summary>The same as a table{points.length > ROWS_SHOWN ? `, the newest ${ROWS_SHOWN}` : ''}</summary>
        <div className="calibration-table">
          <table className="table">
            <thead>
              <tr>
                <th scope="col">Coat</th>
                <th scope="col">Covered</th>
                {['P10, h', 'Likely, h', 'P90, h', 'Came dry, h', 'Later than likely'].map((head) => (
                  <th key={head} scope="col" className="right">
                    {head}
                  </th>
                ))}
              </tr>
            </thead>
            <tbody>
              {points.slice(0, ROWS_SHOWN).map((point) => (
                <tr key={point.id}>
                  <th scope="row" className="whitespace-nowrap">
                    {point.tag}, coat {point.number}
                  </th>
                  <td className="whitespace-nowrap">{formatDateOfYear(point.coveredAt, timeZone)}</td>
                  {[point.earliestHours, point.likelyHours, point.safeHours, point.dryHours].map((hours, index) => (
                    <td key={`${point.id}${['p10', 'p50', 'p90', 'dry'][index]}`} className="right num">
                      {oneDecimal(hours)}
                    </td>
                  ))}
                  <td className="right num whitespace-nowrap">
                    {signedDuration(point.errorMinutes)}
                    {!point.isInside && ', outside'}
                  </td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      </details>
    </div>
  )
}
