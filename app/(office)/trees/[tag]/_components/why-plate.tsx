import { Plate } from '@/app/_components/plate'
import { TimePair } from '@/app/_components/time-pair'
import { WithdrawKey } from '@/app/(office)/trees/[tag]/_components/withdraw-key'
import { UNDO_MS } from '@/lib/coats/undo-window'
import { formatClock, formatDate, formatMoment } from '@/lib/format/local-time'
import { NOT_CALIBRATED } from '@/lib/format/time-pair'
import type { Units } from '@/lib/format/units'
import { may, type Role } from '@/lib/members/roles'
import type { CoatEvidence } from '@/lib/trees/detail-contract'
import { evidenceWords } from '@/lib/trees/evidence-words'
import type { Why } from '@/lib/trees/why'
import { shiftWords, whyWords } from '@/lib/trees/why-words'

export type WhyPlateProps = {
  why: Why
  evidence: readonly CoatEvidence[]
  viewer: { id: string; role: Role }
  isUncalibrated: boolean
  units: Units
  now: number
  timeZone: string
}

/** Why the time stands where it does: a sentence, two bands on one axis, and each piece with what it does by itself. */
export function WhyPlate({ why, evidence, viewer, isUncalibrated, units, now, timeZone }: WhyPlateProps) {
  const standing = evidence.filter((piece) => piece.withdrawnAt === null)
  return (
    <Plate title="Why this time" line={isUncalibrated ? NOT_CALIBRATED : undefined}>
      <p className="why-sentence">{whyWords(why, standing, { now, timeZone })}</p>
      <Bands why={why} evidence={standing} now={now} timeZone={timeZone} />
      <dl className="why-pairs">
        <div>
          <dt>By the clock alone</dt>
          <dd>
            <TimePair pair={why.byClock} now={now} timeZone={timeZone} />
          </dd>
        </div>
        <div>
          <dt>With what was noted</dt>
          <dd>
            <TimePair pair={why.asTold} now={now} timeZone={timeZone} />
          </dd>
        </div>
      </dl>
      <ul className="why-pieces">
        {standing.map((piece) => {
          const effect = why.pieces.find(({ evidenceId }) => evidenceId === piece.id)
          const isOwn = piece.memberId === viewer.id && now - piece.loggedAt <= UNDO_MS
          return (
            <li key={piece.id}>
              <span>
                {piece.by}, {formatMoment(piece.at, now, timeZone)}: {evidenceWords(piece, units)}
              </span>
              <b>{effect?.shiftMs == null || effect.unheard !== null ? '' : shiftWords(effect.shiftMs)}</b>
              {effect?.unheard != null && <span className="why-unheard">{effect.unheard}</span>}
              {(isOwn || may(viewer.role, 'correct')) && <WithdrawKey evidenceId={piece.id} wantsReason={!isOwn} />}
            </li>
          )
        })}
      </ul>
    </Plate>
  )
}

const WIDTH = 640
const LEFT = 8
const ROW_CLOCK = 66
const ROW_TOLD = 132
const AXIS = 156
const HEIGHT = 188
/** The word 'now' stands under the axis where it does not run into the two ends. */
const ROOM_FOR_NOW = 150

/** Two bands on one axis: earliest to safe with a stroke at likely, by the clock above, as told below; marks where evidence was taken. */
function Bands({ why, evidence, now, timeZone }: Pick<WhyPlateProps, 'why' | 'evidence' | 'now' | 'timeZone'>) {
  const ends = [why.byClock, why.asTold].flatMap(({ earliestAt, likelyAt, safeAt }) => [earliestAt, likelyAt, safeAt])
  const known = [...ends, ...evidence.map(({ at }) => at), now].filter((at) => at !== null)
  const [from, to] = [Math.min(...known), Math.max(...known)]
  if (!(to > from)) return null
  const x = (at: number) => LEFT + ((at - from) / (to - from)) * (WIDTH - 2 * LEFT)
  const hasDay = to - from > 20 * 3_600_000
  const label = (at: number) => (hasDay ? `${formatDate(at, timeZone)} ${formatClock(at, timeZone)}` : formatClock(at, timeZone))
  const band = (times: Why['byClock'], y: number, name: string, tone: string) => {
    const { earliestAt, likelyAt, safeAt } = times
    if (likelyAt === null) return null
    const [left, right] = [x(earliestAt ?? likelyAt), x(safeAt ?? to)]
    return (
      <g className={tone}>
        <text x={LEFT} y={y - 18} className="why-label">
          {name}
        </text>
        <rect x={left} y={y - 8} width={Math.max(3, right - left)} height="16" className="why-band" />
        <path d={`M${x(likelyAt)} ${y - 12}v24`} className="why-likely" />
        {safeAt !== null && <path d={`M${x(safeAt)} ${y - 12}v24`} className="why-safe" />}
      </g>
    )
  }
  return (
    <figure className="why-figure">
      <svg viewBox={`0 0 ${WIDTH} ${HEIGHT}`} role="img" aria-label="The time by the clock alone, above, and with what was noted, below">
        {evidence.map((piece) => (
          <g key={piece.id} className={piece.verdict === 'not yet' ? 'why-mark why-mark-wet' : 'why-mark'}>
            <path d={`M${x(piece.at)} 18V${AXIS}`} />
            <circle cx={x(piece.at)} cy="12" r="6" />
          </g>
        ))}
        {band(why.byClock, ROW_CLOCK, 'By the clock alone', 'why-clock')}
        {band(why.asTold, ROW_TOLD, 'With what was noted', 'why-told')}
        <path d={`M${x(now)} 18V${AXIS}`} className="why-now" />
        <path d={`M${LEFT} ${AXIS}H${WIDTH - LEFT}`} className="why-axis" />
        <text x={LEFT} y={HEIGHT - 8} className="why-label">
          {label(from)}
        </text>
        <text x={WIDTH - LEFT} y={HEIGHT - 8} textAnchor="end" className="why-label">
          {label(to)}
        </text>
        {x(now) > ROOM_FOR_NOW && x(now) < WIDTH - ROOM_FOR_NOW && (
          <text x={x(now)} y={HEIGHT - 8} textAnchor="middle" className="why-label">
            now
          </text>
        )}
      </svg>
      <figcaption>Band: earliest to safe; thick stroke: likely; ring: something was noted; long line: now.</figcaption>
    </figure>
  )
}
