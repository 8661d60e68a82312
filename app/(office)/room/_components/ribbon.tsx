import { TimeDrawing, TimeFoot, leftOf, shareOf, xOf, type Frame } from '@/app/(office)/room/_components/chart-frame'
import { wholeNumber } from '@/lib/format/units'
import { RANGE_NAMES } from '@/lib/room/range'
import { linedStretches, ribbonRuns } from '@/lib/room/ribbon'
import { chartLines, type ChartPoint, type RoomPoint } from '@/lib/room/series'

const HEIGHT = 150
const MIDDLE = HEIGHT / 2
/** Half the thickness at the reference speed; faster air reaches the edge at a quarter more. */
const HALF = 60
const line = (speed: number) => Math.min(MIDDLE, speed * HALF)

/** A word needs this much of the ribbon on a desk, and this much on a phone. */
const WORD_SHARE = 0.094
const PHONE_WORD_SHARE = 0.23
/** A shorter stretch takes the word of its neighbour. */
const SHORTEST_SHARE = 0.0625

/** The closed shape of the ribbon between the line above the middle and its mirror below. */
function shape(frame: Frame, points: readonly ChartPoint[], of: (point: ChartPoint) => number): string {
  const above = points.map((point) => `${xOf(frame, point.at)} ${(MIDDLE - line(of(point))).toFixed(1)}`)
  const below = points.toReversed().map((point) => `${xOf(frame, point.at)} ${(MIDDLE + line(of(point))).toFixed(1)}`)
  return `M${[...above, ...below].join('L')}Z`
}

function edge(frame: Frame, points: readonly ChartPoint[], side: 1 | -1): string {
  return `M${points.map((point) => `${xOf(frame, point.at)} ${(MIDDLE + side * line(point.likely)).toFixed(1)}`).join('L')}`
}

/** Slow and fast drying over the drawn time: as thick as the air is fast, between the lines of the recipe's room. */
export function Ribbon({ frame, points, nowPct }: { frame: Frame; points: readonly RoomPoint[]; nowPct: number | null }) {
  const lines = chartLines(points, (point) => point.speed)
  const spanMs = frame.to - frame.from
  const runs = ribbonRuns(points, frame.now, SHORTEST_SHARE * spanMs)
  const slow = linedStretches(points, frame.now)
  const words = runs.map((run) => `${run.word} ${wholeNumber(run.speed * 100)} %${run.isForecast ? ' forecast' : ''}`).join(', ')
  return (
    <>
      <div className="ribbon-now">
        <span className="num" style={shareOf(frame, frame.now) > 0.8 ? { right: 0 } : { left: `calc(${leftOf(frame, frame.now)} + 8px)` }}>
          Now {nowPct === null ? 'not known' : `${wholeNumber(nowPct)} %`}
        </span>
        <span className="ribbon-recipe">the green lines: recipe speed</span>
      </div>
      <TimeDrawing
        frame={frame}
        height={HEIGHT}
        label={`Drying speed over ${RANGE_NAMES[frame.range]} against the recipe’s room: ${words || 'not known'}.`}
        words={
          <div aria-hidden="true">
            {runs
              .filter((run) => run.to - run.from >= WORD_SHARE * spanMs)
              .map((run) => (
                <span
                  key={run.from}
                  className={`ribbon-word ${run.isForecast ? 'is-forecast' : ''} ${run.to - run.from < PHONE_WORD_SHARE * spanMs ? 'not-phone' : ''}`}
                  style={{ left: leftOf(frame, (Math.max(frame.from, run.from) + Math.min(frame.to, run.to)) / 2) }}
                >
                  {run.word} <small>{wholeNumber(run.speed * 100)} %</small>
                </span>
              ))}
          </div>
        }
      >
        <clipPath id="ribbon-past">
          {lines
            .filter((part) => !part.isForecast)
            .map((part) => (
              <path key={part.points[0]!.at} d={shape(frame, part.points, (point) => point.likely)} />
            ))}
        </clipPath>
        <clipPath id="ribbon-forecast">
          {lines
            .filter((part) => part.isForecast)
            .map((part) => (
              <path key={part.points[0]!.at} d={shape(frame, part.points, (point) => point.likely)} />
            ))}
        </clipPath>
        {lines.map((part) => (
          <g key={`${part.points[0]!.at}${part.isForecast}`}>
            <path d={shape(frame, part.points, (point) => point.high)} className="ribbon-edge" />
            <path
              d={shape(frame, part.points, (point) => (part.isForecast ? point.low : point.likely))}
              className={part.isForecast ? 'ribbon-forecast' : 'ribbon-past'}
            />
          </g>
        ))}
        {slow.map(({ from, to }) => (
          <g key={from} clipPath={`url(#${from >= frame.now ? 'ribbon-forecast' : 'ribbon-past'})`}>
            {Array.from({ length: Math.floor(HEIGHT / 9) }, (_, index) => (
              <path
                key={index}
                d={`M${xOf(frame, from)} ${index * 9 + 7}H${xOf(frame, to)}`}
                className={from >= frame.now ? 'ribbon-line is-forecast' : 'ribbon-line'}
              />
            ))}
          </g>
        ))}
        {lines
          .filter((part) => part.isForecast)
          .flatMap((part) =>
            ([1, -1] as const).map((side) => (
              <path key={`${part.points[0]!.at}${side}`} d={edge(frame, part.points, side)} className="ribbon-dash" />
            )),
          )}
        {[MIDDLE - HALF, MIDDLE + HALF].map((y) => (
          <path key={y} d={`M0 ${y}H1000`} className="recipe-line" />
        ))}
      </TimeDrawing>
      <TimeFoot frame={frame} />
    </>
  )
}
