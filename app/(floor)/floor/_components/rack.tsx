import Link from 'next/link'
import { StateGlyph } from '@/app/_components/state-mark'
import { fittedTagHeight, Tag } from '@/app/_components/tag'
import { usePress } from '@/app/_components/use-press'
import { foldRack, type Rail, type RailName } from '@/lib/floor/fold-rack'
import { NOT_CALIBRATED, timePairWords } from '@/lib/format/time-pair'
import type { QueueTree } from '@/lib/queue/contract'
import type { TreeState } from '@/lib/trees/states'
import { RowKey } from './row-key'

export type RackProps = {
  lastCoatOn: QueueTree[]
  driedOut: QueueTree[]
  ready: QueueTree[]
  held: QueueTree[]
  rows: number
  /** The rack lies under the tide: no room for a tag beside the key that counts the rest. */
  isNarrow: boolean
  now: number
  timeZone: string
  onList: (section: string) => void
  /** Opens the sheet of a held tree; absent for those who only look. */
  onHeld?: (tree: QueueTree) => void
}

const RAILS: Record<RailName, { words: string; state: TreeState; section: string }> = {
  'last coat on': { words: 'Last coat on', state: 'last coat on', section: 'last-coat-on' },
  'dried out': { words: 'Dried out, look over', state: 'dried out', section: 'dried-out' },
  ready: { words: 'Ready for burnout', state: 'ready for burnout', section: 'ready-for-burnout' },
}

/** On a rail of single tags the last one gives up its words for the key that counts the rest. */
const isSharing = (rail: Rail, index: number) => rail.name !== 'ready' && rail.hasMore && index === rail.shown - 1

/** Trees past their last dip, as they hang; and those that are held. */
export function Rack({ lastCoatOn, driedOut, ready, held, rows, isNarrow, now, timeZone, onList, onHeld }: RackProps) {
  const trees: Record<RailName, QueueTree[]> = { 'last coat on': lastCoatOn, 'dried out': driedOut, ready }
  const rails = foldRack({ 'last coat on': lastCoatOn.length, 'dried out': driedOut.length, ready: ready.length }, rows).map((rail) =>
    isNarrow && rail.hasMore && rail.name !== 'last coat on' ? { ...rail, shown: 0 } : rail,
  )
  const moreKey = (rail: Rail) => (
    <MoreHook
      words={rail.shown === 0 ? `See all ${rail.count}` : `and ${rail.count - rail.shown} more`}
      onPress={() => onList(RAILS[rail.name].section)}
    />
  )
  return (
    <aside className="rack" aria-label="Finishing rack">
      <h2 className="column-head">
        <span>Finishing rack</span>
        <i>{lastCoatOn.length + driedOut.length + ready.length}</i>
      </h2>
      <div className="frame">
        {rails.map((rail) => (
          <section key={rail.name} className={`rail ${rail.name === 'ready' ? 'rail-two' : ''}`}>
            <h3>
              <StateGlyph state={RAILS[rail.name].state} />
              <span>{RAILS[rail.name].words}</span>
              <u className="num">{rail.count}</u>
            </h3>
            <ul>
              {trees[rail.name].slice(0, rail.shown).map((tree, index) => {
                const hook = <Hook tree={tree} now={now} timeZone={timeZone} rail={rail.name} isTagOnly={isSharing(rail, index)} />
                return (
                  <li key={tree.id} className={isSharing(rail, index) ? 'hook-pair' : undefined}>
                    {hook}
                    {isSharing(rail, index) && moreKey(rail)}
                  </li>
                )
              })}
              {rail.hasMore && (rail.name === 'ready' || rail.shown === 0) && <li className="rail-more">{moreKey(rail)}</li>}
            </ul>
          </section>
        ))}
      </div>
      {held.length > 0 && <Held trees={held} onList={onList} onHeld={onHeld} />}
    </aside>
  )
}

function Hook({
  tree,
  now,
  timeZone,
  rail,
  isTagOnly,
}: {
  tree: QueueTree
  now: number
  timeZone: string
  rail: RailName
  isTagOnly: boolean
}) {
  const pair = tree.dry ? timePairWords(tree.dry, now, timeZone) : null
  const damp = tree.warnings.find((warning) => warning.code === 'damp in store')
  return (
    <Link className="hook" href={`/trees/${encodeURIComponent(tree.tag)}`} prefetch={false} title={tree.title}>
      <Tag tag={tree.tag} height={fittedTagHeight(tree.tag, 28)} ground="bone" />
      {tree.isDemo && <span className="vh">Demo</span>}
      {rail === 'last coat on' && !isTagOnly && (
        <span>
          {pair ? (
            <>
              <span>
                likely {pair.likely.day} <b className="num">{pair.likely.clock}</b>
              </span>
              <span>
                safe {pair.safe.day} <b className="num">{pair.safe.clock}</b>
              </span>
              {tree.isUncalibrated && <span className="vh">{NOT_CALIBRATED}</span>}
            </>
          ) : (
            <span>no time yet</span>
          )}
        </span>
      )}
      {rail === 'dried out' && !isTagOnly && (
        <span className="rail-place">{damp ? <span>damp in store</span> : <span className="truncate">{tree.place.name}</span>}</span>
      )}
    </Link>
  )
}

function MoreHook({ words, onPress }: { words: string; onPress: () => void }) {
  const press = usePress(onPress)
  return (
    <button type="button" className="hook hook-more" {...press}>
      {words}
    </button>
  )
}

function Held({ trees, onList, onHeld }: { trees: QueueTree[]; onList: RackProps['onList']; onHeld: RackProps['onHeld'] }) {
  const first = trees[0]!
  return (
    <section className="held" aria-label="Held">
      <h2 className="column-head">
        <span>Held</span>
        <i>{trees.length}</i>
      </h2>
      <RowKey treeId={first.id} tag={first.tag} className="held-tree" onPress={onHeld && first.next ? () => onHeld(first) : undefined}>
        <Tag tag={first.tag} height={fittedTagHeight(first.tag, 30)} isHeld ground="bone" />
        <span className="held-reason">{first.hold?.reason ?? 'No reason given'}</span>
      </RowKey>
      {trees.length > 1 && <MoreHook words={`and ${trees.length - 1} more`} onPress={() => onList('held')} />}
    </section>
  )
}
