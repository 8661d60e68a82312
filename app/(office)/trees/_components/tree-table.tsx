import Link from 'next/link'
import { StateMark } from '@/app/_components/state-mark'
import { fittedTagHeight, Tag } from '@/app/_components/tag'
import { DueWords } from '@/app/(office)/_components/due-words'
import { PourWords } from '@/app/(office)/_components/pour-words'
import { TreeSection } from '@/app/(office)/_components/tree-section'
import { pourVerdict, type PourContext } from '@/lib/burnout/pour-verdict'
import { coatsOnWords } from '@/lib/format/coat-words'
import type { TreeListRow } from '@/lib/trees/tree-list'

/** The list of trees. On a phone each row is laid out as a card; roles are spelled out because that layout drops a table's own. */
export function TreeTable({ trees, context }: { trees: readonly TreeListRow[]; context: PourContext }) {
  const { now, timeZone } = context
  return (
    <section className="plate tree-list" aria-label="Trees">
      <table className="table" role="table">
        <thead role="rowgroup">
          <tr role="row">
            {['Tree', 'Piece', 'Shell', 'State', 'Next', 'Place', 'Recipe', 'Pour'].map((head) => (
              <th key={head} role="columnheader" scope="col">
                {head}
              </th>
            ))}
          </tr>
        </thead>
        <tbody role="rowgroup">
          {trees.map((tree) => (
            <tr key={tree.id} role="row" className="link-row">
              <td role="cell" className="c-tag">
                <Tag tag={tree.tag} height={fittedTagHeight(tree.tag, 32)} isHeld={tree.state === 'held'} />
              </td>
              <th role="rowheader" scope="row" className="c-piece">
                {/* The link covers its whole row. */}
                <Link className="row-link" href={`/trees/${encodeURIComponent(tree.tag)}`} prefetch={false}>
                  {tree.title}
                </Link>
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
