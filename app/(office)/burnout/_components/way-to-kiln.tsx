import { kilnPath, type PathShell } from '@/lib/burnout/kiln-path'
import type { PourContext } from '@/lib/burnout/pour-verdict'
import { localDay } from '@/lib/schedule/shifts'
import { formatDay } from '@/lib/format/local-time'
import { timePairWords } from '@/lib/format/time-pair'
import type { QueueTree } from '@/lib/queue/contract'

const WIDTH = 1384
const LEFT = 36
const DOOR = 150
const PAVING_TOP = 246
const PAVING = 36
const LEVEL_STEP = 52
const LOWEST_LABEL = 166

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
  const path = kilnPath(trees, context, WIDTH - LEFT - DOOR - 170)
  if (path.shells.length === 0) return null
  const today = localDay(context.now, context.timeZone)
  const end = LEFT + path.width
  const height = PAVING_TOP + PAVING + 4
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
      <svg className="way-drawing" viewBox={`0 0 ${WIDTH} ${height}`} role="group" aria-label="Trees on the way to the kiln, in the order in which they are safe">
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
                {day.width < 40 ? '' : day.day === today ? 'today' : day.width < 100 ? formatDay(day.day).slice(0, 3) : formatDay(day.day).replace(/ \w+$/, '')}
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
        {path.shells.map((shell) => (
          <Shell key={shell.tree.id} shell={shell} context={context} />
        ))}
        {path.isMoreLater > 0 && (
          <text x={end + DOOR - 20} y={PAVING_TOP - 20} className="way-more">
            {path.isMoreLater} more in
            <tspan x={end + DOOR - 20} dy="20">
              the lists below
            </tspan>
          </text>
        )}
      </svg>
    </section>
  )
}

function Shell({ shell, context }: { shell: PathShell; context: PourContext }) {
  const { tree, verdict } = shell
  const x = LEFT + shell.safeX
  const likelyX = LEFT + shell.likelyX
  const labelY = LOWEST_LABEL - shell.level * LEVEL_STEP
  const { text } = timePairWords(shell, context.now, context.timeZone)
  const title = tree.title.length > 22 ? `${tree.title.slice(0, 21)}…` : tree.title
  const share = tree.coats.length === 0 ? 1 : tree.coatsOn / tree.coats.length
  const size = 0.7 + 0.3 * share
  const tagWidth = tree.tag.length * 10.4 + 24
  return (
    <g role="img" aria-label={`${tree.tag}, ${tree.title}: dried out ${text}${verdict === null ? '' : `, pour ${verdict}`}`}>
      <path d={`M${x} ${labelY + 22}V${PAVING_TOP - 54 * size}`} stroke="var(--ink)" strokeWidth="1.5" />
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
      <g transform={`translate(${x - 6} ${labelY - 14})`}>
        <rect x="-4" y="-8" width={LABEL_WIDTH} height="44" fill="var(--paper)" />
        <path d={`M6-6H${tagWidth}V16H6L0 10V0Z`} fill="var(--ink)" />
        <circle cx="7" cy="5" r="2.4" fill="var(--paper)" />
        <text x="15" y="12" className="way-tag">
          {tree.tag}
        </text>
        <text x={tagWidth + 8} y="11" className="way-piece">
          {title}
        </text>
        <text x="0" y="32" className="way-time">
          {text}
          {verdict !== null && verdict !== 'holds' && (
            <tspan dx="6" fill={VERDICT_INK[verdict]} fontWeight="600">
              {verdict}
            </tspan>
          )}
        </text>
      </g>
    </g>
  )
}

const LABEL_WIDTH = 190
const EGG = 'M-6-11C-21-15-20-51 0-53C20-51 21-15 6-11L10 0H-10Z'
