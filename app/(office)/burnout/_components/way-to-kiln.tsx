import { kilnPath, type PathStand } from '@/lib/burnout/kiln-path'
import type { PourContext } from '@/lib/burnout/pour-verdict'
import { formatDay, localDay } from '@/lib/format/local-time'
import { timePairWords } from '@/lib/format/time-pair'
import type { QueueTree } from '@/lib/queue/contract'

const WIDTH = 1384
const LEFT = 28
const DOOR = 116
const MORE = 150
const PAVING_TOP = 268
const PAVING = 36
const DOOR_TOP = PAVING_TOP + PAVING - 182
const LEVEL_STEP = 54
const LOWEST_LABEL = 184

const VERDICT_INK = {
  holds: 'var(--verdigris-ink)',
  tight: 'var(--ochre-ink)',
  'will miss': 'var(--furnace-ink)',
  passed: 'var(--furnace-ink)',
  'not in sight': 'var(--soot)',
} as const

/**
 * The way to the kiln: paving by day up to the door, each shell standing where it is safe, with an open notch where it is
 * likely. The tables below say the same in rows, so a phone goes without.
 */
export function WayToKiln({ trees, context }: { trees: readonly QueueTree[]; context: PourContext }) {
  const room = WIDTH - LEFT - DOOR
  const whole = kilnPath(trees, context, room)
  const path = whole.moreCount === 0 ? whole : kilnPath(trees, context, room - MORE)
  if (path.stands.length === 0) return null
  const today = localDay(context.now, context.timeZone)
  const end = LEFT + path.width
  const highest = Math.max(...path.stands.map((stand) => stand.label?.level ?? 0))
  // The door is the least height; labels may stand higher.
  const top = Math.min(DOOR_TOP, LOWEST_LABEL - highest * LEVEL_STEP - 24)
  return (
    <section className="plate way">
      <header>
        <h2>On the way to the kiln</h2>
        <p className="way-key">
          <svg viewBox="0 0 14 12" width="16" height="14" aria-hidden="true">
            <path d="M1 1h12l-6 10z" fill="var(--paper)" stroke="var(--ink)" strokeWidth="1.8" />
          </svg>
          likely dried out
          <svg viewBox="0 0 14 12" width="16" height="14" aria-hidden="true">
            <path d="M0 12h14l-7-12z" fill="var(--ink)" />
          </svg>
          safe: the shell stands here
          <svg viewBox="0 0 24 12" width="26" height="13" aria-hidden="true">
            <path d="M0 6h24" stroke="var(--ink)" strokeWidth="5" />
          </svg>
          between the two
        </p>
      </header>
      <svg
        className="way-drawing"
        viewBox={`0 ${top} ${WIDTH} ${PAVING_TOP + PAVING + 4 - top}`}
        role="group"
        aria-label="Trees on the way to the kiln, in the order in which they are safe"
      >
        <defs>
          <pattern id="way-closed" width="9" height="9" patternUnits="userSpaceOnUse">
            <path d="M0 9L9 0" stroke="var(--edge)" strokeWidth="1.2" />
          </pattern>
        </defs>
        <g aria-hidden="true">
          {path.days.map((day, index) => (
            <g key={day.day} transform={`translate(${LEFT + day.x} ${PAVING_TOP})`}>
              <rect width={day.width} height={PAVING} fill="var(--sunk)" />
              {!day.isOpen && <rect width={day.width} height={PAVING} fill="url(#way-closed)" />}
              {index > 0 && <path d={`M0 0V${PAVING}`} stroke="var(--ink)" strokeWidth="2" />}
              <text x="8" y="25" className="way-day">
                {day.width < 40
                  ? ''
                  : day.day === today
                    ? 'today'
                    : day.width < 100
                      ? formatDay(day.day).slice(0, 3)
                      : formatDay(day.day).replace(/ \w+$/, '')}
              </text>
            </g>
          ))}
          <path d={`M${LEFT} ${PAVING_TOP}H${end}M${LEFT} ${PAVING_TOP + PAVING}H${end}`} stroke="var(--ink)" strokeWidth="3" />
          <g transform={`translate(${end} ${PAVING_TOP + PAVING})`}>
            <path d="M0 0V-132Q0-176 55-176T110-132V0Z" fill="var(--shell)" stroke="var(--ink)" strokeWidth="4" />
            <path d="M14-2V-120Q14-160 55-160T96-120V-2Z" fill="var(--slurry)" />
            <path d="M36-2C24-24 40-34 40-48c10 6 12 14 12 20 4-8 4-14 2-22 16 10 30 32 18 50z" fill="var(--furnace)" />
            <text x="55" y="-104" textAnchor="middle" className="way-door">
              Kiln
            </text>
          </g>
        </g>
        {path.stands.map((stand) => (
          <Stand key={stand.trees[0]?.id} stand={stand} context={context} />
        ))}
        {/* Labels last: a leader on its way up passes behind them. */}
        {path.stands.map((stand) => (
          <StandLabel key={stand.trees[0]?.id} stand={stand} context={context} />
        ))}
        {path.moreCount > 0 && (
          <text x={end + DOOR + 12} y={PAVING_TOP - 4} className="way-more">
            {path.moreCount} more in
            <tspan x={end + DOOR + 12} dy="20">
              the lists below
            </tspan>
          </text>
        )}
      </svg>
    </section>
  )
}

const TAG_GAP = 6
const tagWidth = (tag: string) => tag.length * 9 + 24

const labelTop = (level: number) => LOWEST_LABEL - level * LEVEL_STEP

/** The pair of a stand; of several shells it is the latest, so it is true for all of them. */
function standWords(stand: PathStand, { now, timeZone }: PourContext): string {
  const { text } = timePairWords(stand, now, timeZone)
  return stand.trees.length > 1 ? `all ${text}` : text
}

/** Shells at one spot: the drawn shell of the first stands for all. */
function Stand({ stand, context }: { stand: PathStand; context: PourContext }) {
  const { trees, verdict, label } = stand
  const [first] = trees
  if (first === undefined) return null
  const x = LEFT + stand.safeX
  const likelyX = LEFT + stand.likelyX
  const text = standWords(stand, context)
  const share = first.coats.length === 0 ? 1 : first.coatsOn / first.coats.length
  const size = 0.7 + 0.3 * share
  const names = trees.map((tree) => `${tree.tag}, ${tree.title}`).join('; ')
  return (
    <g role="img" aria-label={`${names}: dried out ${text}${verdict === null ? '' : `, pour ${verdict}`}`}>
      {label !== null && <path d={`M${x} ${labelTop(label.level) + 30}V${PAVING_TOP - 54 * size}`} stroke="var(--ink)" strokeWidth="1.5" />}
      <path d={`M${likelyX} ${PAVING_TOP}H${x}`} stroke="var(--ink)" strokeWidth="5" />
      <path d={`M${likelyX - 6} ${PAVING_TOP - 12}h12l-6 10z`} fill="var(--paper)" stroke="var(--ink)" strokeWidth="1.8" />
      <g transform={`translate(${x} ${PAVING_TOP - 2})`}>
        {share < 1 && <path d={EGG} fill="none" stroke="var(--edge)" strokeWidth="1.2" strokeDasharray="3 2.4" />}
        <g transform={`scale(${size})`}>
          <path d={EGG} fill="var(--shell)" stroke="var(--ink)" strokeWidth="1.8" />
          <circle cx="0" cy="-32" r="7" fill="var(--wax)" />
        </g>
      </g>
      <path d={`M${x - 7} ${PAVING_TOP + 13}h14l-7-12z`} fill="var(--ink)" />
    </g>
  )
}

/** The tags of a stand as far as they fit, its pair and its verdict. Said in words by the stand itself. */
function StandLabel({ stand, context }: { stand: PathStand; context: PourContext }) {
  const { trees, verdict, label } = stand
  const [first] = trees
  if (first === undefined || label === null) return null
  const tags = trees.slice(0, 2).map(({ tag }, index, shown) => ({ tag, left: index === 0 ? 0 : tagWidth(shown[0]?.tag ?? '') + TAG_GAP }))
  const last = tags.at(-1)
  const besideX = last === undefined ? 0 : last.left + tagWidth(last.tag) + TAG_GAP + 2
  const title = first.title.length > 20 ? `${first.title.slice(0, 19)}…` : first.title
  const beside = trees.length === 1 ? title : trees.length > 2 ? `and ${trees.length - 2} more` : ''
  return (
    <g transform={`translate(${LEFT + label.x} ${labelTop(label.level) - 12})`} aria-hidden="true">
      <rect x="-4" y="-6" width={label.width - 6} height="44" fill="var(--paper)" />
      {tags.map(({ tag, left }) => (
        <g key={tag} transform={`translate(${left} 0)`}>
          <path d={`M6-4H${tagWidth(tag)}V18H6L0 12V2Z`} fill="var(--ink)" />
          <circle cx="7" cy="7" r="2.4" fill="var(--paper)" />
          <text x="15" y="14" className="way-tag">
            {tag}
          </text>
        </g>
      ))}
      <text x={besideX} y="13" className="way-piece">
        {beside}
      </text>
      <text x="0" y="35" className="way-time">
        {standWords(stand, context)}
        {verdict !== null && verdict !== 'holds' && (
          <tspan dx="10" style={{ fill: VERDICT_INK[verdict], fontWeight: 600 }}>
            {verdict}
          </tspan>
        )}
      </text>
    </g>
  )
}

const EGG = 'M-6-11C-21-15-20-51 0-53C20-51 21-15 6-11L10 0H-10Z'
