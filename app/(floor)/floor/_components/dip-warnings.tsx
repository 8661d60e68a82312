import { Icon } from '@/app/_components/icons'
import { useUnits } from '@/app/_components/units-context'
import { tagsWords } from '@/lib/floor/dip-draft'
import { formatDuration } from '@/lib/format/duration'
import { NOT_CALIBRATED, timePairWords } from '@/lib/format/time-pair'
import type { QueueTree, Warning } from '@/lib/queue/contract'
import { warningText } from '@/lib/queue/warning-text'

/** How many warnings show before the rest are counted. */
const MOST = 3

type Told = Warning & { tags: string[] }

/** Warnings of all trees of a run, each sentence once, the gravest first. */
export function warningsOf(trees: readonly QueueTree[]): Told[] {
  const told: Told[] = []
  for (const tree of trees) {
    for (const warning of tree.warnings) {
      const same = told.find((candidate) => candidate.code === warning.code && candidate.text === warning.text)
      if (same) same.tags.push(tree.tag)
      else told.push({ ...warning, tags: [tree.tag] })
    }
  }
  const rank = { stop: 0, warn: 1, note: 2 }
  return told.toSorted((a, b) => rank[a.level] - rank[b.level])
}

export type DipWarningsProps = { trees: QueueTree[]; now: number; timeZone: string }

/** The warning plate. It warns; nothing on it keeps anybody from logging what was done. */
export function DipWarnings({ trees, now, timeZone }: DipWarningsProps) {
  const told = warningsOf(trees)
  if (told.length === 0) return null
  const [only] = trees
  const pair = trees.length === 1 && only?.dry && told.some(({ code }) => code === 'still wet') ? only.dry : null
  const shown = told.slice(0, MOST)
  return (
    <div className={`warn-plate ${told[0]?.level === 'stop' ? 'warn-plate-stop' : ''}`} role="alert">
      <Icon name="warning" />
      <ul>
        {shown.map((warning) => (
          <li key={`${warning.code} ${warning.text}`}>
            <Sentence warning={warning} hasTags={trees.length > 1} />
          </li>
        ))}
        {told.length > MOST && <li>and {told.length - MOST} more on the page of the tree</li>}
      </ul>
      {pair && (
        <div className="warn-pair">
          <Pair pair={pair} now={now} timeZone={timeZone} />
          {only?.isUncalibrated && <small>{NOT_CALIBRATED}</small>}
        </div>
      )}
    </div>
  )
}

/** The first sentence says what is wrong, the rest what to do about it. */
function Sentence({ warning, hasTags }: { warning: Told; hasTags: boolean }) {
  const text = warningText(warning, useUnits().temp)
  const end = text.indexOf('. ')
  const head = end < 0 ? text.replace(/\.$/, '') : text.slice(0, end)
  const rest = end < 0 ? '' : text.slice(end + 2)
  return (
    <>
      <b>
        {hasTags && `${tagsWords(warning.tags)}: `}
        {head}
      </b>
      {rest && <span>{rest}</span>}
    </>
  )
}

function Pair({ pair, now, timeZone }: { pair: { likelyAt: number | null; safeAt: number | null }; now: number; timeZone: string }) {
  const words = timePairWords(pair, now, timeZone)
  const cells = [
    { ...words.likely, at: pair.likelyAt },
    { ...words.safe, at: pair.safeAt },
  ]
  return (
    <dl>
      {cells.map((cell) => (
        <div key={cell.word}>
          <dt>
            {cell.word} {cell.day}
          </dt>
          <dd className={cell.isKnown ? 'warn-clock num' : ''}>{cell.clock}</dd>
          {cell.at !== null && <dd>{cell.at > now ? `in ${formatDuration(cell.at - now)}` : 'reached'}</dd>}
        </div>
      ))}
    </dl>
  )
}
