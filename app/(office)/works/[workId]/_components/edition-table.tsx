import { Icon } from '@/app/_components/icons'
import { StateMark } from '@/app/_components/state-mark'
import { fittedTagHeight, Tag } from '@/app/_components/tag'
import { coatsOnWords } from '@/lib/format/coat-words'
import type { WorkCast } from '@/lib/queries/work-detail'
import type { EditionCell, EditionRow } from '@/lib/works/edition-table'
import { sectionWord } from '@/lib/works/section-word'

export type EditionTableProps = {
  rows: readonly EditionRow<WorkCast>[]
  sections: readonly { id: string; name: string }[]
  now: number
}

/** Editions by sections: the tree that carries each, how far it is, and what is missing, by name. */
export function EditionTable({ rows, sections, now }: EditionTableProps) {
  const nameOf = new Map(sections.map(({ id, name }) => [id, sectionWord(name)]))
  return (
    <div className="scroll-x">
      <table className="table edition-table" role="table">
        <thead role="rowgroup">
          <tr role="row">
            <th role="columnheader" scope="col">
              Edition
            </th>
            {sections.map(({ id, name }) => (
              <th key={id} role="columnheader" scope="col">
                {sectionWord(name)}
              </th>
            ))}
          </tr>
        </thead>
        <tbody role="rowgroup">
          {rows.map((row) => (
            <tr key={row.editionNumber} role="row">
              <th role="rowheader" scope="row">
                <span className="num">
                  <span className="only-phone">Edition </span>
                  {row.editionNumber}
                </span>
                {row.missing.length === 0 ? (
                  <span className="edition-whole">
                    <Icon name="check" /> all here
                  </span>
                ) : (
                  <span className="edition-missing">
                    <Icon name="warning" />{' '}
                    {row.missing.length === sections.length
                      ? 'nothing here'
                      : `missing: ${row.missing.map((id) => nameOf.get(id)).join('; ')}`}
                  </span>
                )}
              </th>
              {row.cells.map((cell) => (
                <td key={cell.sectionId} role="cell">
                  <span className="cell-label">{nameOf.get(cell.sectionId)}</span>
                  <Cell cell={cell} now={now} />
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}

function Cell({ cell: { standing, earlier, missing }, now }: { cell: EditionCell<WorkCast>; now: number }) {
  const scrapped = earlier.flatMap(({ tree }) => (tree?.state === 'scrapped' ? [tree.tag] : []))
  return (
    <div className="edition-cell">
      {standing === null ? (
        <span className="edition-missing">
          <Icon name="cross" /> {missing === 'scrapped' ? 'Missing: not cast again' : 'Missing: never cast'}
        </span>
      ) : standing.tree === null ? (
        <span className="text-soot">Cast, on no tree</span>
      ) : (
        <>
          <Tag tag={standing.tree.tag} height={fittedTagHeight(standing.tree.tag, 32)} isHeld={standing.tree.state === 'held'} isLink />
          <span>
            <StateMark state={standing.tree.state} since={standing.tree.stateSince} now={now} />
            {standing.tree.state !== 'released' && <span className="block text-14 text-soot">{coatsOnWords(standing.tree)}</span>}
          </span>
        </>
      )}
      {scrapped.length > 0 && (
        <span className="edition-scrapped">
          {scrapped.length === 1 ? `${scrapped[0]} was scrapped` : `${scrapped.join(' and ')} were scrapped`}
          {standing?.isRecast === true && ', this is the recast'}
        </span>
      )}
    </div>
  )
}
