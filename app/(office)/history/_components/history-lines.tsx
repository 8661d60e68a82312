import Link from 'next/link'
import { formatClock, formatDate, localDay } from '@/lib/format/local-time'
import { changeRows, type ChangeContext } from '@/lib/history/change-rows'
import type { HistoryLine } from '@/lib/history/history-line'

/** Lines of history under the day on which they happened. */
export function HistoryLines({ lines, context }: { lines: readonly HistoryLine[]; context: ChangeContext }) {
  const days = new Map<string, HistoryLine[]>()
  for (const line of lines) {
    const day = localDay(line.at, context.timeZone)
    days.set(day, [...(days.get(day) ?? []), line])
  }
  return (
    <div className="history-days">
      {[...days].map(([day, ofDay]) => (
        <section key={day} className="plate">
          <header>
            <h2>{dayTitle(ofDay[0]?.at ?? 0, context)}</h2>
          </header>
          <ol className="history-lines">
            {ofDay.map((line) => (
              <Line key={line.key} line={line} context={context} />
            ))}
          </ol>
        </section>
      ))}
    </div>
  )
}

/** With the year where it is not this one. */
function dayTitle(at: number, { now, timeZone }: ChangeContext): string {
  const [year, thisYear] = [localDay(at, timeZone).slice(0, 4), localDay(now, timeZone).slice(0, 4)]
  return year === thisYear ? formatDate(at, timeZone) : `${formatDate(at, timeZone)} ${year}`
}

function Line({ line, context }: { line: HistoryLine; context: ChangeContext }) {
  const rows = changeRows(line.before, line.after, context)
  return (
    <li>
      <span className="num">{formatClock(line.at, context.timeZone)}</span>
      <span className="history-about">
        <Subject line={line} />
      </span>
      <div className="history-what">
        <p>{line.text}</p>
        {rows.length > 0 && (
          <details>
            <summary>{rows.length === 1 ? '1 field' : `${rows.length} fields`}, before and after</summary>
            <table className="history-change">
              <thead>
                <tr>
                  <th scope="col">Field</th>
                  <th scope="col">Before</th>
                  <th scope="col">After</th>
                </tr>
              </thead>
              <tbody>
                {rows.map(({ field, before, after }) => (
                  <tr key={field}>
                    <th scope="row">{field}</th>
                    <td>{before ?? 'not there'}</td>
                    <td>{after ?? 'not there'}</td>
                  </tr>
                ))}
              </tbody>
            </table>
          </details>
        )}
      </div>
      <span className="history-who">
        <b>{line.by ?? 'Kilnward'}</b>
        {line.device !== '' && <span>{line.device}</span>}
      </span>
    </li>
  )
}

function Subject({ line: { subject, kind } }: { line: HistoryLine }) {
  const words = subject.type === 'tree' ? subject.name : subject.name || subject.type
  if (words === '') return kind
  if (subject.href === null) return words
  return (
    <Link href={subject.href} prefetch={false}>
      {words}
    </Link>
  )
}
