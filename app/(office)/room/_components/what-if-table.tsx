import Link from 'next/link'
import { Icon } from '@/app/_components/icons'
import { fittedTagHeight, Tag } from '@/app/_components/tag'
import { TimePair } from '@/app/_components/time-pair'
import { roughDuration } from '@/lib/format/duration'
import { NOT_CALIBRATED } from '@/lib/format/time-pair'
import type { RoomWhatIfAnswer, WhatIfTree } from '@/lib/room/room-what-if-contract'
import { SLOT_WORDS } from '@/lib/room/room-what-if-words'

/** More rows than this stand in a fold. */
const FIRST_ROWS = 12
/** Under this nothing has changed that anybody would notice. */
const LEAST_MS = 150_000

/** Every drying tree of the room, as things stand and in the other air. */
export function WhatIfTable({ answer, timeZone }: { answer: RoomWhatIfAnswer; timeZone: string }) {
  const { trees, now } = answer
  if (trees.length === 0) return null
  // Where all of them are, the verdict says so once.
  const isMixed = trees.some((tree) => tree.isUncalibrated) && trees.some((tree) => !tree.isUncalibrated)
  const moment = { isMixed, now, timeZone }
  return (
    <div className="scroll-x">
      <Rows trees={trees.slice(0, FIRST_ROWS)} {...moment} />
      {trees.length > FIRST_ROWS && (
        <details className="fold">
          <summary>{trees.length - FIRST_ROWS} more, which are dry later or not known</summary>
          <Rows trees={trees.slice(FIRST_ROWS)} {...moment} />
        </details>
      )}
    </div>
  )
}

type Moment = { now: number; timeZone: string }

function Rows({ trees, isMixed, now, timeZone }: { trees: readonly WhatIfTree[]; isMixed: boolean } & Moment) {
  return (
    <table className="table effect-table what-if-table" role="table">
      <thead role="rowgroup">
        <tr role="row">
          {['Tree', 'Piece', 'As it stands', 'In this air', 'Sooner', 'Ready', 'Harm'].map((head) => (
            <th key={head} role="columnheader" scope="col">
              {head}
            </th>
          ))}
        </tr>
      </thead>
      <tbody role="rowgroup">
        {trees.map((tree) => (
          <tr key={tree.treeId} role="row" className="link-row">
            <td role="cell" className="c-tag">
              <Tag tag={tree.tag} height={fittedTagHeight(tree.tag, 32)} />
            </td>
            <th role="rowheader" scope="row" className="c-piece">
              <Link className="row-link" href={`/trees/${encodeURIComponent(tree.tag)}`} prefetch={false}>
                {tree.title}
              </Link>
              <span className="block text-14 font-normal text-soot">
                coat {tree.coatNumber}, {tree.placeName}
                {isMixed && tree.isUncalibrated && `, ${NOT_CALIBRATED}`}
              </span>
            </th>
            <PairCell head="As it stands" pair={tree.before} guard={tree.guard} now={now} timeZone={timeZone} />
            <PairCell head="In this air" pair={tree.after} guard={tree.guard} now={now} timeZone={timeZone} />
            <td role="cell" className="c-sooner">
              <SoonerWords tree={tree} />
            </td>
            <td role="cell" className="c-ready">
              <span className="cell-label" aria-hidden="true">
                Ready:{' '}
              </span>
              {tree.readyBefore === tree.readyAfter ? (
                SLOT_WORDS[tree.readyAfter]
              ) : (
                <>
                  {SLOT_WORDS[tree.readyBefore]} → <b>{SLOT_WORDS[tree.readyAfter]}</b>
                </>
              )}
            </td>
            <td role="cell" className="c-harm">
              {tree.harms.length === 0 ? (
                <span className="text-soot not-phone">none</span>
              ) : (
                <b className="text-furnace-ink">
                  <Icon name="warning" /> {tree.harms.join(', ')}
                </b>
              )}
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  )
}

type PairCellProps = { head: string; pair: WhatIfTree['before']; guard: WhatIfTree['guard'] } & Moment

function PairCell({ head, pair, guard, now, timeZone }: PairCellProps) {
  return (
    <td role="cell" className="c-pair">
      <span className="cell-label" aria-hidden="true">
        {head}:{' '}
      </span>
      {pair === null ? <span className="text-soot">not known</span> : <TimePair pair={pair} now={now} timeZone={timeZone} guard={guard} />}
    </td>
  )
}

function SoonerWords({ tree }: { tree: WhatIfTree }) {
  const at = (pair: WhatIfTree['before']) => (tree.guard === 'safe' ? pair?.safeAt : pair?.likelyAt) ?? null
  const [before, after] = [at(tree.before), at(tree.after)]
  if (before === null || after === null) return <span className="text-soot">{before === after ? 'not known' : 'not in sight'}</span>
  if (Math.abs(before - after) < LEAST_MS) return <span className="text-soot">the same</span>
  return (
    <span className={after < before ? 'text-verdigris-ink' : 'text-wet-ink'}>
      <span className="num">{roughDuration(before - after)}</span> {after < before ? 'sooner' : 'later'}
    </span>
  )
}
