import Link from 'next/link'
import { DemoMark } from '@/app/_components/demo-mark'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { ShellSection } from '@/app/_components/shell-section'
import { StateGlyph, StateMark } from '@/app/_components/state-mark'
import { StuccoSwatch } from '@/app/_components/stucco-swatch'
import { fittedTagHeight, Tag } from '@/app/_components/tag'
import { usePress } from '@/app/_components/use-press'
import { countTrees, longestWait, runKeyWords, treesWord, type DipGroup } from '@/lib/floor/arrange'
import type { DipNowPlan } from '@/lib/floor/fold-dip-now'
import { coatsOnWords, thenStucco } from '@/lib/format/coat-words'
import { formatDuration } from '@/lib/format/duration'
import type { QueueTree } from '@/lib/queue/contract'
import { sectionOf } from '@/lib/trees/section'
import { RowKey } from './row-key'

export type DipActs = {
  /** Absent for those who only look. */
  onTree?: (tree: QueueTree) => void
  onRun?: (trees: QueueTree[]) => void
  onStir?: (bathId: string) => void
}

export type DipNowProps = DipActs & {
  groups: DipGroup[]
  plan: DipNowPlan
  bareWax: QueueTree[]
  now: number
  chosenIds: ReadonlySet<string>
  stirringBathId: string | null
  /** In portrait a sheet leaves the column little height. */
  isBesideSheet: boolean
  nextWords: string | null
  canLog: boolean
  onOpenGroup: (key: string) => void
  onPage: (key: string, page: number) => void
  onList: (section: string) => void
}

/** What to dip now, in runs: one bath and one stucco each. */
export function DipNow(props: DipNowProps) {
  const { groups, plan, bareWax, nextWords, canLog, isBesideSheet } = props
  const count = countTrees(groups)
  return (
    <section
      className={['dip', plan.isDense ? 'is-dense' : '', isBesideSheet ? 'is-beside-sheet' : ''].filter(Boolean).join(' ')}
      aria-label="Dip now"
    >
      <h2 className="column-head" id="dip-now" tabIndex={-1}>
        <span>Dip now</span>
        <i>{headWords(count, groups.length, canLog)}</i>
      </h2>
      <span className="dip-now-flag" aria-hidden="true">
        NOW
      </span>
      {groups.length === 0 && (
        <p className="dip-nothing">
          <b>Nothing to dip now</b>
          {nextWords ?? 'No tree is on its way to a dip.'}
        </p>
      )}
      {plan.slots.map((slot) => {
        if (slot.kind === 'more') return <MoreGroups key="more" {...props} keys={slot.groupKeys} />
        const group = groups.find((candidate) => candidate.key === slot.groupKey)
        if (!group) return null
        if (slot.kind === 'fold') return <FoldedGroup key={group.key} {...props} group={group} />
        return <OpenGroup key={group.key} {...props} group={group} slot={slot} />
      })}
      {bareWax.length > 0 && <BareWaxLine trees={bareWax} onList={props.onList} />}
    </section>
  )
}

function headWords(count: number, groups: number, canLog: boolean): string {
  const words = groups > 2 ? `${treesWord(count)} in ${groups} groups` : treesWord(count)
  return canLog ? words : `${words}; you look on, operators log`
}

function GroupName({ group, isShort }: { group: DipGroup; isShort: boolean }) {
  return (
    <>
      {group.bathName}
      <i>, {isShort ? (group.stucco === 'none' ? 'none (seal)' : group.stucco) : thenStucco(group.stucco)}</i>
    </>
  )
}

type OpenSlot = Extract<DipNowPlan['slots'][number], { kind: 'open' }>

function OpenGroup({
  group,
  slot,
  isBesideSheet,
  onTree,
  onRun,
  onStir,
  stirringBathId,
  chosenIds,
  now,
  onPage,
  plan,
}: DipNowProps & { group: DipGroup; slot: OpenSlot }) {
  const left = group.trees.length - slot.to
  const pageSize = slot.to - slot.from
  return (
    <div className="group">
      <h3 className="group-head">
        <StuccoSwatch stucco={group.stucco} />
        <span>
          <GroupName group={group} isShort={false} />
        </span>
        {slot.pages > 1 && <u>{treesWord(group.trees.length)}</u>}
      </h3>
      <div className="group-body" style={onRun ? undefined : { gridTemplateColumns: 'minmax(0, 1fr)' }}>
        {onRun && (
          <div className="group-keys order-2">
            <Key
              size={108}
              tone="go"
              onPress={() => onRun(group.trees)}
              aria-label={`${runKeyWords(group.trees.length)}: ${group.bathName}, ${thenStucco(group.stucco)}`}
            >
              {runKeyWords(group.trees.length)}
            </Key>
            {!group.isStirred && onStir && !isBesideSheet && (
              <StirKey group={group} isBusy={stirringBathId === group.bathId} onStir={onStir} />
            )}
          </div>
        )}
        <ul>
          {group.trees.slice(slot.from, slot.to).map((tree) => (
            <li key={tree.id}>
              <DipRow
                tree={tree}
                now={now}
                isDense={plan.isDense}
                isChosen={chosenIds.has(tree.id)}
                onPress={onTree && (() => onTree(tree))}
              />
            </li>
          ))}
        </ul>
      </div>
      {slot.pages > 1 && (
        <PageKey
          words={left > 0 ? `${left} more in this group` : `Back to the first ${Math.min(group.trees.length, pageSize)}`}
          page={slot.page}
          pages={slot.pages}
          onPress={() => onPage(group.key, left > 0 ? slot.page + 1 : 0)}
        />
      )}
    </div>
  )
}

export function StirKey({ group, isBusy, onStir }: { group: DipGroup; isBusy: boolean; onStir: (bathId: string) => void }) {
  return (
    <Key
      size={64}
      icon="stir"
      className="stir"
      isOff={isBusy}
      onPress={() => onStir(group.bathId)}
      aria-label={`Stir ${group.bathName} first, then touch: stirred`}
    >
      <span>
        <b>Stir first</b>
        <small>{isBusy ? 'noting it' : 'then touch'}</small>
      </span>
    </Key>
  )
}

function DipRow({
  tree,
  now,
  isDense,
  isChosen,
  onPress,
}: {
  tree: QueueTree
  now: number
  isDense: boolean
  isChosen: boolean
  onPress: (() => void) | undefined
}) {
  return (
    <RowKey
      treeId={tree.id}
      tag={tree.tag}
      onPress={onPress}
      isChosen={isChosen}
      className={`row-key ${tree.state === 'overdue' ? 'row-key-overdue' : ''}`}
    >
      <span className="row-shell">
        <Tag tag={tree.tag} height={fittedTagHeight(tree.tag, isDense ? 36 : 40)} />
        <ShellSection {...sectionOf(tree)} height={isDense ? 23 : 26} width={118} isDecoration />
      </span>
      <span className="row-words">
        <b title={tree.title}>
          {tree.isDemo && <DemoMark />} {tree.title}
        </b>
        <i>
          <em>{tree.place.name}</em>
          {coatsOnWords(tree)}
        </i>
        <StateMark state={tree.state} since={tree.stateSince} now={now} />
      </span>
      {isChosen && <Icon name="check" className="row-check" />}
    </RowKey>
  )
}

function FoldedGroup({ group, now, onOpenGroup }: DipNowProps & { group: DipGroup }) {
  const press = usePress(() => onOpenGroup(group.key))
  const overdue = group.trees.filter((tree) => tree.state === 'overdue')
  // What is overdue is told of the overdue trees only: another may have waited longer and yet be in time.
  const longest = longestWait(overdue.length > 0 ? overdue : group.trees, now)
  return (
    <button type="button" className="fold-key" {...press} aria-expanded={false}>
      <StuccoSwatch stucco={group.stucco} />
      <span>
        <b>
          <GroupName group={group} isShort />
        </b>
        {overdue.length > 0 ? (
          <StateMark state="overdue" words={`${overdue.length} overdue, longest ${formatDuration(longest ?? 0)}`} />
        ) : longest !== null ? (
          <StateMark state="waiting" words={`longest wait ${formatDuration(longest)}`} />
        ) : (
          <StateMark state="wax ready" words="wax ready" />
        )}
      </span>
      <u>{group.trees.length}</u>
      <Icon name="down" />
    </button>
  )
}

function MoreGroups({ groups, keys, onList }: DipNowProps & { keys: string[] }) {
  const press = usePress(() => onList('dip-now'))
  const hidden = groups.filter((group) => keys.includes(group.key))
  return (
    <button type="button" className="fold-key" {...press}>
      <span>
        <b>{hidden.length === 1 ? '1 more group' : `${hidden.length} more groups`}</b>
        <small>in the list</small>
      </span>
      <u>{countTrees(hidden)}</u>
      <Icon name="list" />
    </button>
  )
}

function BareWaxLine({ trees, onList }: { trees: QueueTree[]; onList: (section: string) => void }) {
  const press = usePress(() => onList('bare-wax'))
  const only = trees.length === 1 ? trees[0] : undefined
  const inside = (
    <>
      <StateGlyph state="bare wax" className="state-wax" />
      <span>
        <b>
          Bare wax<i>, intake not passed</i>
        </b>
        <small>{trees.map((tree) => tree.tag).join(', ')}</small>
      </span>
      <u>{trees.length}</u>
    </>
  )
  return only ? (
    <Link className="fold-key" href={`/trees/${encodeURIComponent(only.tag)}`} prefetch={false}>
      {inside}
    </Link>
  ) : (
    <button type="button" className="fold-key" {...press}>
      {inside}
      <Icon name="list" />
    </button>
  )
}

export function PageKey({
  words,
  page,
  pages,
  note,
  onPress,
}: {
  words: string
  page: number
  pages: number
  note?: string
  onPress: () => void
}) {
  const press = usePress(onPress)
  return (
    <button type="button" className="page-key" {...press}>
      <Icon name={page + 1 < pages ? 'down' : 'up'} />
      <b>{words}</b>
      <span>{note ?? `page ${page + 1} of ${pages}`}</span>
    </button>
  )
}
