import { formatMoment } from '@/lib/format/local-time'
import type { TreeDetail } from '@/lib/trees/detail-contract'
import type { Moment } from '@/app/(office)/_components/due-words'

const SHOWN = 12

/** What has happened to the tree, newest first; a long past is folded. */
export function History({ history, now, timeZone }: { history: TreeDetail['history'] } & Moment) {
  const events = history.toSorted((left, right) => right.at - left.at || right.id - left.id)
  const earlier = events.slice(SHOWN)
  const lines = (some: TreeDetail['history']) => (
    <ol className="history">
      {some.map((event) => (
        <li key={event.id}>
          <span className="num">{formatMoment(event.at, now, timeZone)}</span>
          <span>
            {event.text}
            {event.by !== null && <span className="text-soot"> {event.by}</span>}
          </span>
        </li>
      ))}
    </ol>
  )
  if (events.length === 0) return <p className="px-4 py-3 text-15 text-soot">Nothing yet.</p>
  return (
    <>
      {lines(events.slice(0, SHOWN))}
      {earlier.length > 0 && (
        <details className="fold">
          <summary>{earlier.length} earlier</summary>
          {lines(earlier)}
        </details>
      )}
    </>
  )
}
