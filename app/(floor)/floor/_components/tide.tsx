import { DemoMark } from '@/app/_components/demo-mark'
import { ShellSection } from '@/app/_components/shell-section'
import { StateMark } from '@/app/_components/state-mark'
import { fittedTagHeight, Tag } from '@/app/_components/tag'
import { hasUncalibratedTime, treesWord } from '@/lib/floor/arrange'
import { tideCapacity, tideRowHeight } from '@/lib/floor/floor-plan'
import { placeRow, tidePage, tideRows, type TideRow } from '@/lib/floor/tide-rows'
import type { TideScale } from '@/lib/floor/tide-scale'
import { coatsOnWords } from '@/lib/format/coat-words'
import { TIMES_NOT_CALIBRATED, timePairWords, type PairTime, type TimePairWords } from '@/lib/format/time-pair'
import type { QueueTree } from '@/lib/queue/contract'
import { sectionOf } from '@/lib/trees/section'
import { PageKey } from './dip-now'
import { RowKey } from './row-key'
import { useElementSize } from './use-viewport'

export type TideProps = {
  drying: QueueTree[]
  /** Trees on the rack, where a time has no room for a word beside it: the head of the tide speaks for them too. */
  onRack: QueueTree[]
  scale: TideScale
  now: number
  timeZone: string
  rowsHeight: number
  page: number
  onPage: (page: number) => void
  /** Absent for those who only look. */
  onTrees?: (trees: QueueTree[]) => void
}

/** Rows under this height, px, set their letters a little tighter. */
const LOW_ROW = 84
/** Tags abreast in a row of a run, before the rest are counted. */
const TAGS_IN_ROW = 3

/** What dries, by the time it comes due: water from now to likely, wet sand from likely to safe. */
export function Tide({ drying, onRack, scale, now, timeZone, rowsHeight, page, onPage, onTrees }: TideProps) {
  const [measure, { width }] = useElementSize({ width: 488, height: 500 })
  const shown = tidePage(tideRows(drying), tideCapacity(rowsHeight), page)
  const hasPageKey = shown.pages > 1
  const height = tideRowHeight(rowsHeight, shown.rows.length, hasPageKey)
  const unknown = drying.filter((tree) => tree.state === 'unknown').length
  // The page key names a time of the first row that is to come.
  const timed = [...shown.rows, ...shown.laterRows.slice(0, 1)].flatMap((row) => row.trees)
  const isUncalibrated = hasUncalibratedTime([...timed, ...onRack])
  return (
    <section className="tide" aria-label="Drying, by the time each tree comes due">
      <h2 className={`column-head ${isUncalibrated ? 'column-head-noted' : ''}`}>
        <span>Drying</span>
        <i>
          {treesWord(drying.length)}
          {unknown > 0 && `, ${unknown} unknown`}
        </i>
        <span className="tide-key" aria-hidden="true">
          <u className="tide-key-water" />
          likely
          <u className="tide-key-sand" />
          safe
        </span>
        {isUncalibrated && <small>{TIMES_NOT_CALIBRATED}</small>}
      </h2>
      <div className="sea" ref={measure}>
        <div aria-hidden="true">
          {scale.zones.map((zone) => (
            <div
              key={zone.kind}
              className={`tide-zone tide-zone-${zone.kind}`}
              style={{ left: `${zone.from * 100}%`, width: `${(zone.to - zone.from) * 100}%` }}
            >
              <span>{zone.label}</span>
            </div>
          ))}
          {scale.ticks.map((tick) => (
            <span key={tick.at} className="tide-tick" style={{ left: `${tick.position * 100}%` }}>
              {tick.label}
            </span>
          ))}
        </div>
        {drying.length === 0 && (
          <p className="tide-nothing">No coat is drying. A tree stands here from its dip until it may be dipped again.</p>
        )}
        <ol className="tide-rows">
          {shown.rows.map((row) => (
            <li key={row.key}>
              <Row row={row} scale={scale} now={now} timeZone={timeZone} width={width} height={height} onTrees={onTrees} />
            </li>
          ))}
        </ol>
        {hasPageKey && (
          <PageKey
            words={shown.laterTrees > 0 ? `${shown.laterTrees} more` : 'Back to the first'}
            page={shown.page}
            pages={shown.pages}
            note={shown.laterTrees > 0 ? laterNote(shown.laterRows, now, timeZone) : `page ${shown.page + 1} of ${shown.pages}`}
            onPress={() => onPage(shown.laterTrees > 0 ? shown.page + 1 : 0)}
          />
        )}
      </div>
    </section>
  )
}

function laterNote(later: readonly TideRow[], now: number, timeZone: string): string {
  const next = later[0]?.trees[0]
  if (!next?.dry || next.state === 'unknown') return 'how dry is not known'
  return `next ${timePairWords(next.dry, now, timeZone).text}`
}

/** Room that the two times need beside each other, px, on the safe side of the measured letters. */
function timesWidth({ likely, safe }: TimePairWords): number {
  return 28 + timeWidth(likely) + timeWidth(safe)
}

const timeWidth = ({ day, isKnown }: PairTime) => 44 + (day === '' ? 0 : 6 + day.length * 9) + (isKnown ? 56 : 105)
const percent = (share: number) => `${share * 100}%`

type RowProps = {
  row: TideRow
  scale: TideScale
  now: number
  timeZone: string
  width: number
  height: number
  onTrees: TideProps['onTrees']
}

function Row({ row, scale, now, timeZone, width, height, onTrees }: RowProps) {
  const tree = row.trees[0]!
  const words = tree.dry ? timePairWords(tree.dry, now, timeZone) : null
  const { water, label } = placeRow(tree, scale, width, words ? timesWidth(words) : 240)
  const isNearly = tree.state === 'nearly dry'
  const isLow = height < LOW_ROW
  return (
    <RowKey
      treeId={tree.id}
      tag={tree.tag}
      onPress={onTrees && (() => onTrees(row.trees))}
      className={['tide-row', isNearly ? 'tide-row-nearly' : '', water ? '' : 'tide-row-unknown', isLow ? 'tide-row-low' : '']
        .filter(Boolean)
        .join(' ')}
      style={{ height }}
    >
      {water && (
        <>
          <span className="tide-sand" data-beyond={water.isSafeBeyond} style={{ width: percent(water.safe) }} />
          <span className="tide-water" data-beyond={water.isLikelyBeyond} style={{ width: percent(water.likely) }} />
        </>
      )}
      <span
        className={`tide-label tide-label-${label.side}`}
        style={label.side === 'inside' ? { right: width - label.width, maxWidth: label.width } : { left: label.left, width: label.width }}
      >
        <span>
          {row.trees.slice(0, TAGS_IN_ROW).map(({ tag, id }) => (
            <Tag key={id} tag={tag} height={fittedTagHeight(tag, isLow ? 26 : 28)} ground="bone" />
          ))}
          {row.trees.length > TAGS_IN_ROW && <b className="tide-title">+{row.trees.length - TAGS_IN_ROW}</b>}
          {row.trees.length === 1 && (
            <b className="tide-title" title={tree.title}>
              {tree.title}
            </b>
          )}
          {row.trees.length === 1 && tree.isDemo && <DemoMark />}
        </span>
        {words && water ? (
          <span className="tide-times">
            <Time time={words.likely} isSecond={tree.guard === 'safe'} />
            <Time time={words.safe} isSecond={tree.guard === 'likely'} />
          </span>
        ) : (
          <span className="tide-times">{noTimeWords(tree)}</span>
        )}
        <span className="tide-coats">
          <ShellSection {...sectionOf(tree)} height={isLow ? 14 : 16} width={96} isDecoration />
          {isNearly || tree.state === 'unknown' ? <StateMark state={tree.state} /> : <span>{coatsOnWords(tree)}</span>}
        </span>
      </span>
    </RowKey>
  )
}

function noTimeWords(tree: QueueTree): string {
  return tree.state === 'unknown' ? 'No reading, so no time: feel it' : 'No time in sight'
}

function Time({ time, isSecond }: { time: PairTime; isSecond: boolean }) {
  return (
    <span>
      {time.word} {time.day !== '' && `${time.day} `}
      <b className={`num ${isSecond ? 'is-second' : ''}`}>{time.clock}</b>
    </span>
  )
}
