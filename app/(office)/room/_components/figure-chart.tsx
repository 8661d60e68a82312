import { TimeDrawing, xOf, type Frame } from '@/app/(office)/room/_components/chart-frame'
import { RANGE_SPANS } from '@/lib/room/range'
import { evenBounds } from '@/lib/trees/curve-series'
import { chartLines, type ChartPoint, type Figure, type RoomPoint } from '@/lib/room/series'

const HEIGHT = 96

export type FigureChartProps = {
  frame: Frame
  points: readonly RoomPoint[]
  name: string
  valueOf: (point: RoomPoint) => Figure | null
  /** The foundry's band, in the same unit as the values; null where there is none. */
  band: { low: number; high: number } | null
  /** Whole steps of the scale. */
  step: number
  /** The newest value, as large words. */
  value: string
  unit: string
  /** Under the value: the band, and whatever else belongs to it. */
  notes: readonly string[]
  tone: 'wax' | 'wet' | 'ink'
  format: (value: number) => string
  /** A day's bounds are its least and its most, and no doubt about its mean. */
  hasEnds?: boolean
}

/** One figure of the room over the drawn time: measured, each day from its least to its most, then dashed within its band; its value at the right end. */
export function FigureChart({
  frame,
  points,
  name,
  valueOf,
  band,
  step,
  value,
  unit,
  notes,
  tone,
  format,
  hasEnds = false,
}: FigureChartProps) {
  const lines = chartLines(points, valueOf)
  const all = lines.flatMap((line) => line.points.flatMap((point) => [point.low, point.high]))
  const [low, high] = evenBounds([...all, ...(band ? [band.low, band.high] : [])], step)
  const y = (figure: number) => Number((6 + (1 - (figure - low) / (high - low || 1)) * (HEIGHT - 12)).toFixed(1))
  const path = (line: readonly ChartPoint[], of: (point: ChartPoint) => number) =>
    line.map((point) => `${xOf(frame, point.at)} ${y(of(point))}`).join('L')
  const ofDays = hasEnds && frame.range === '1y'
  const measured = lines
    .filter((line) => !line.isForecast)
    .flatMap((line) => line.points.flatMap((point) => (ofDays ? [point.low, point.high] : [point.likely])))
  const ends = `${format(Math.min(...measured))} to ${format(Math.max(...measured))}`
  const range = measured.length === 0 ? 'not read' : `${ends} ${RANGE_SPANS[frame.range]}`
  return (
    <div className="figure-chart">
      <TimeDrawing frame={frame} height={HEIGHT} label={`${name}: ${range}.`}>
        {band && <rect x="0" width="1000" y={y(band.high)} height={Math.max(1, y(band.low) - y(band.high))} className="band-wash" />}
        {band && [band.low, band.high].map((edge) => <path key={edge} d={`M0 ${y(edge)}H1000`} className="band-line" />)}
        {lines.map((line) => (
          <g key={`${line.points[0]!.at}${line.isForecast}`} className={`tone-${tone}`}>
            {line.points.some((point) => point.low !== point.high) && (
              <path
                d={`M${path(line.points, (point) => point.high)}L${path(line.points.toReversed(), (point) => point.low)}Z`}
                className="doubt"
              />
            )}
            <path
              d={`M${path(line.points, (point) => point.likely)}${line.points.length === 1 ? 'h6' : ''}`}
              className={line.isForecast ? 'value-line is-forecast' : 'value-line'}
            />
          </g>
        ))}
      </TimeDrawing>
      <p className="figure-words">
        <b className="figure-name">{name}</b>
        <span className="figure-value">
          <span className="num">{value}</span> <span className="num figure-unit">{unit}</span>
        </span>
        {notes.map((note) => (
          <span key={note}>{note}</span>
        ))}
        <span>{range}</span>
      </p>
    </div>
  )
}
