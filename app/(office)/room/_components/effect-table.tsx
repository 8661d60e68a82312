import Link from 'next/link'
import { DemoMark } from '@/app/_components/demo-mark'
import { fittedTagHeight, Tag } from '@/app/_components/tag'
import { TimePair } from '@/app/_components/time-pair'
import { TreeSection } from '@/app/(office)/_components/tree-section'
import type { EffectRow } from '@/lib/room/room-contract'
import { roughDuration } from '@/lib/format/duration'

const HOUR_MS = 3_600_000
/** Under this nobody would notice. */
const LEAST_MS = 5 * 60_000

type Moment = { now: number; timeZone: string }

/** What the night does to each drying tree: hours lost, won back by the dryer, its times, and what to do. */
export function EffectTable({
  rows,
  longestMs,
  dryerPct,
  now,
  timeZone,
}: { rows: readonly EffectRow[]; longestMs: number; dryerPct: number | null } & Moment) {
  const heads = [
    'Tree',
    'Piece',
    'Shell',
    'Hours lost',
    'Lost',
    'As it stands',
    ...(dryerPct === null ? [] : [`With the air at ${dryerPct} %`]),
    'What to do',
  ]
  return (
    <table className="table effect-table" role="table">
      <thead role="rowgroup">
        <tr role="row">
          {heads.map((head) => (
            <th key={head} role="columnheader" scope="col" className={head === 'Lost' ? 'right' : ''}>
              {head}
            </th>
          ))}
        </tr>
      </thead>
      <tbody role="rowgroup">
        {rows.map((row) => (
          <tr key={row.tree.id} role="row" className="link-row">
            <td role="cell" className="c-tag">
              <Tag tag={row.tree.tag} height={fittedTagHeight(row.tree.tag, 32)} isHeld={row.tree.state === 'held'} />
            </td>
            <th role="rowheader" scope="row" className="c-piece">
              <Link className="row-link" href={`/trees/${encodeURIComponent(row.tree.tag)}`} prefetch={false}>
                {row.tree.title}
              </Link>{' '}
              {row.tree.isDemo && <DemoMark />}
              <span className="block text-14 font-normal text-soot">{row.tree.place.name}</span>
            </th>
            <td role="cell" className="c-shell">
              <TreeSection tree={row.tree} height={20} fit={96} isDecoration />
            </td>
            <td role="cell" className="c-bar">
              <HoursBar row={row} longestMs={longestMs} />
            </td>
            <td role="cell" className="c-lost right">
              <LostWords lostMs={row.lostMs} />
            </td>
            <td role="cell" className="c-pair">
              <span className="cell-label" aria-hidden="true">
                As it stands:{' '}
              </span>
              {row.asItStands === null ? (
                <span className="text-soot">not known</span>
              ) : (
                <TimePair pair={row.asItStands} now={now} timeZone={timeZone} guard={row.tree.guard} />
              )}
            </td>
            {dryerPct !== null && (
              <td role="cell" className="c-pair">
                {row.withDryer !== null && (
                  <>
                    <span className="cell-label" aria-hidden="true">
                      With the air at {dryerPct} %:{' '}
                    </span>
                    <TimePair pair={row.withDryer} now={now} timeZone={timeZone} className="text-verdigris-ink" />
                  </>
                )}
              </td>
            )}
            <td role="cell" className="c-do">
              {row.toDo}
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  )
}

function LostWords({ lostMs }: { lostMs: number | null }) {
  if (lostMs === null) return <span className="text-soot">not known</span>
  if (Math.abs(lostMs) < LEAST_MS) return <span className="text-soot">none</span>
  if (lostMs < 0) {
    return (
      <span className="text-verdigris-ink">
        wins <span className="num">{roughDuration(lostMs)}</span>
      </span>
    )
  }
  return <span className="num">{roughDuration(lostMs)}</span>
}

/** As long as the hours lost, a tick an hour; its right part is what the dryer wins back. */
function HoursBar({ row, longestMs }: { row: EffectRow; longestMs: number }) {
  const lostMs = row.lostMs ?? 0
  if (lostMs < LEAST_MS) return null
  const wonMs = Math.min(lostMs, Math.max(0, row.wonBackMs ?? 0))
  const tick = `${((HOUR_MS / lostMs) * 100).toFixed(3)}%`
  return (
    <span
      className="hours-bar"
      style={{ width: `${Math.max(3, (lostMs / longestMs) * 100).toFixed(2)}%`, '--tick': tick }}
      aria-hidden="true"
    >
      {wonMs > 0 && (
        <span
          className="hours-won"
          style={{ width: `${((wonMs / lostMs) * 100).toFixed(2)}%`, '--tick': `${((HOUR_MS / wonMs) * 100).toFixed(3)}%` }}
        />
      )}
    </span>
  )
}
