import { useState, type ReactNode } from 'react'
import { DemoMark } from '@/app/_components/demo-mark'
import { Key } from '@/app/_components/key'
import { ShellSection } from '@/app/_components/shell-section'
import { StateMark } from '@/app/_components/state-mark'
import { Tag, fittedTagHeight } from '@/app/_components/tag'
import { TimePair } from '@/app/_components/time-pair'
import { countTrees, hasUncalibratedTime, runKeyWords, treesWord, type FloorBoard } from '@/lib/floor/arrange'
import { coatsOnWords } from '@/lib/format/coat-words'
import { TIMES_NOT_CALIBRATED } from '@/lib/format/time-pair'
import type { QueueTree } from '@/lib/queue/contract'
import { sectionOf } from '@/lib/trees/section'
import { StirKey, type DipActs } from './dip-now'
import { RowKey } from './row-key'

export type FloorListProps = DipActs & {
  board: FloorBoard
  now: number
  timeZone: string
  chosenIds: ReadonlySet<string>
  stirringBathId: string | null
  /** Rows of a section before 'Show all'. */
  firstRows: number
  canLog: boolean
}

/** The floor as ordered lists: the same trees in the same order, for a phone, a reader, or a calm look. */
export function FloorList({ board, now, timeZone, chosenIds, stirringBathId, firstRows, canLog, onTree, onRun, onStir }: FloorListProps) {
  const row = (tree: QueueTree, middle?: ReactNode) => (
    <ListRow tree={tree} now={now} timeZone={timeZone} isChosen={chosenIds.has(tree.id)} onTree={onTree} middle={middle} />
  )
  const count = countTrees(board.dipNow)
  return (
    <div className="floor-list">
      <section aria-labelledby="list-dip-now">
        <h2 id="list-dip-now" tabIndex={-1}>
          Dip now <i>{treesWord(count)}</i>
        </h2>
        {!canLog && <p className="list-nothing">You look on: operators log the dips.</p>}
        {count === 0 && <p className="list-nothing">Nothing to dip now.</p>}
        {board.dipNow.map((group) => (
          <div key={group.key}>
            <div className="list-group">
              <h3>
                {group.bathName}, {group.stucco === 'none' ? 'none (seal)' : group.stucco}
              </h3>
              {onStir && !group.isStirred && <StirKey group={group} isBusy={stirringBathId === group.bathId} onStir={onStir} />}
              {onRun && (
                <Key size={64} tone="go" className="text-24" onPress={() => onRun(group.trees)}>
                  {runKeyWords(group.trees.length)}
                </Key>
              )}
            </div>
            <Rows trees={group.trees} row={row} firstRows={firstRows} />
          </div>
        ))}
      </section>
      <ListSection
        id="drying"
        title="Drying"
        trees={board.drying}
        hasTimes
        firstRows={firstRows}
        row={(tree) => row(tree, pairOf(tree, now, timeZone))}
      />
      <ListSection
        id="last-coat-on"
        title="Last coat on"
        trees={board.lastCoatOn}
        hasTimes
        firstRows={firstRows}
        row={(tree) => row(tree, pairOf(tree, now, timeZone))}
      />
      <ListSection id="dried-out" title="Dried out, look over" trees={board.driedOut} firstRows={firstRows} row={(tree) => row(tree)} />
      <ListSection id="ready-for-burnout" title="Ready for burnout" trees={board.ready} firstRows={firstRows} row={(tree) => row(tree)} />
      <ListSection id="held" title="Held" trees={board.held} firstRows={firstRows} row={(tree) => row(tree, tree.hold?.reason)} />
      <ListSection id="bare-wax" title="Bare wax" trees={board.bareWax} firstRows={firstRows} row={(tree) => row(tree)} />
    </div>
  )
}

function pairOf(tree: QueueTree, now: number, timeZone: string): ReactNode {
  if (!tree.dry || tree.state === 'unknown') return 'No reading, so no time: feel it'
  return <TimePair pair={tree.dry} now={now} timeZone={timeZone} guard={tree.guard} />
}

function ListSection({
  id,
  title,
  trees,
  row,
  firstRows,
  hasTimes = false,
}: {
  id: string
  title: string
  trees: QueueTree[]
  row: (tree: QueueTree) => ReactNode
  firstRows: number
  hasTimes?: boolean
}) {
  if (trees.length === 0) return null
  return (
    <section aria-labelledby={`list-${id}`}>
      <h2 id={`list-${id}`} tabIndex={-1}>
        {title}{' '}
        <i>
          {trees.length}
          {hasTimes && hasUncalibratedTime(trees) && `, ${TIMES_NOT_CALIBRATED}`}
        </i>
      </h2>
      <Rows trees={trees} row={row} firstRows={firstRows} />
    </section>
  )
}

function Rows({ trees, row, firstRows }: { trees: QueueTree[]; row: (tree: QueueTree) => ReactNode; firstRows: number }) {
  const [isAll, setIsAll] = useState(false)
  const shown = isAll ? trees : trees.slice(0, firstRows)
  const left = trees.length - shown.length
  return (
    <>
      <ol>
        {shown.map((tree) => (
          <li key={tree.id}>{row(tree)}</li>
        ))}
      </ol>
      {left > 0 && (
        <Key size={64} className="mt-2 w-full" icon="down" onPress={() => setIsAll(true)}>
          {left} more
        </Key>
      )}
    </>
  )
}

type ListRowProps = { tree: QueueTree; now: number; timeZone: string; isChosen: boolean; onTree: DipActs['onTree']; middle: ReactNode }

function ListRow({ tree, now, isChosen, onTree, middle }: ListRowProps) {
  const canDip = tree.next !== null && onTree !== undefined && tree.state !== 'bare wax'
  return (
    <RowKey
      treeId={tree.id}
      tag={tree.tag}
      className="list-row"
      isChosen={canDip ? isChosen : undefined}
      onPress={canDip ? () => onTree(tree) : undefined}
    >
      <span className="list-row-tag">
        <Tag tag={tree.tag} height={fittedTagHeight(tree.tag, 32)} ground="bone" />
      </span>
      <span className="list-row-words">
        <b>
          {tree.title} {tree.isDemo && <DemoMark />}
        </b>
        {middle !== undefined && <em className="list-pair">{middle}</em>}
        <em>
          {tree.place.name}, {coatsOnWords(tree)}
        </em>
        <span className="list-row-foot">
          <ShellSection {...sectionOf(tree)} height={20} width={110} isDecoration />
          <StateMark state={tree.state} since={tree.stateSince} now={now} />
        </span>
      </span>
    </RowKey>
  )
}
