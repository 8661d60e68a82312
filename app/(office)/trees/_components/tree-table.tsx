import Link from 'next/link'
import { DemoMark } from '@/app/_components/demo-mark'
import { Icon } from '@/app/_components/icons'
import { StateMark } from '@/app/_components/state-mark'
import { fittedTagHeight, Tag } from '@/app/_components/tag'
import { DueWords } from '@/app/(office)/_components/due-words'
import { PourWords } from '@/app/(office)/_components/pour-words'
import { TreeSection } from '@/app/(office)/_components/tree-section'
import { pourVerdict, type PourContext } from '@/lib/burnout/pour-verdict'
import { coatsOnWords } from '@/lib/format/coat-words'
import type { TreeListRow } from '@/lib/trees/tree-list'
import { treeViewAddress, type TreeSort, type TreeView } from '@/lib/trees/tree-view'

const HEADS: readonly { word: string; sort: TreeSort | null }[] = [
  { word: 'Tree', sort: 'tag' },
  { word: 'Piece', sort: 'piece' },
  { word: 'Shell', sort: 'coats' },
  { word: 'State', sort: 'due' },
  { word: 'Next', sort: null },
  { word: 'Place', sort: 'place' },
  { word: 'Recipe', sort: 'recipe' },
  { word: 'Pour', sort: 'pour' },
]

/** The list of trees; its heads sort it. On a phone each row is laid out as a card; roles are spelled out because that layout drops a table's own. */
export function TreeTable({ trees, context, view }: { trees: readonly TreeListRow[]; context: PourContext; view: TreeView }) {
  const { now, timeZone } = context
  return (
    <section className="plate tree-list" aria-label="Trees">
      <table className="table" role="table">
        <thead role="rowgroup">
          <tr role="row">
            {HEADS.map(({ word, sort }) => (
              <Head key={word} word={word} sort={view.group === 'gone' ? null : sort} view={view} />
            ))}
          </tr>
        </thead>
        <tbody role="rowgroup" data-rows>
          {trees.map((tree) => (
            <tr key={tree.id} role="row" className="link-row">
              <td role="cell" className="c-tag">
                <Tag tag={tree.tag} height={fittedTagHeight(tree.tag, 32)} isHeld={tree.state === 'held'} />
              </td>
              <th role="rowheader" scope="row" className="c-piece">
                {/* The link covers its whole row. */}
                <Link className="row-link" href={`/trees/${encodeURIComponent(tree.tag)}`} prefetch={false}>
                  {tree.title}
                </Link>{' '}
                {tree.isDemo && <DemoMark />}
              </th>
              <td role="cell" className="c-shell">
                <TreeSection tree={tree} height={20} fit={112} isDecoration />
                <span className="block text-14 text-soot">{coatsOnWords(tree)}</span>
              </td>
              <td role="cell" className="c-state">
                <StateMark state={tree.state} since={tree.stateSince} now={now} />
              </td>
              <td role="cell" className="c-due">
                <DueWords tree={tree} now={now} timeZone={timeZone} />
              </td>
              <td role="cell" className="c-place">
                {tree.place.name}
              </td>
              <td role="cell" className="c-recipe">
                {tree.recipeLabel}
              </td>
              <td role="cell" className="c-pour">
                <span className="only-phone text-soot">Pour: </span>
                <PourWords pourDate={tree.pourDate} verdict={pourVerdict(tree, context)} />
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </section>
  )
}

/** Sorts by its column; once more turns the order round. */
function Head({ word, sort, view }: { word: string; sort: TreeSort | null; view: TreeView }) {
  const isSorted = sort !== null && sort === view.sort
  const order = view.isDescending ? 'descending' : 'ascending'
  return (
    <th role="columnheader" scope="col" aria-sort={isSorted ? order : undefined}>
      {sort === null ? (
        word
      ) : (
        <Link
          className="sort-link"
          href={treeViewAddress(view, { sort, isDescending: isSorted && !view.isDescending })}
          prefetch={false}
          replace
        >
          {word}
          {isSorted && <Icon name={view.isDescending ? 'up' : 'down'} />}
        </Link>
      )}
    </th>
  )
}
