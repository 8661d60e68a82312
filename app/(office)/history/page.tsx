import type { Metadata } from 'next'
import { Icon } from '@/app/_components/icons'
import { KeyLink } from '@/app/_components/key'
import { Plate } from '@/app/_components/plate'
import { EmptyState } from '@/app/(office)/_components/empty-state'
import { FoundryNav } from '@/app/(office)/_components/foundry-nav'
import { HistoryLines } from '@/app/(office)/history/_components/history-lines'
import { systemClock } from '@/lib/core/clock'
import { historyAddress, NOBODY, readHistoryCursor, readHistoryFilter, type HistoryFilter } from '@/lib/history/history-filter'
import { loadHistory, type HistoryPage } from '@/lib/queries/history'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { requireMemberPage } from '@/lib/server/auth'
import './history.css'

export const metadata: Metadata = { title: 'History' }

/** Who changed what, when and from where. Read only: history is only added to. */
export default async function HistoryPageOfFoundry({ searchParams }: PageProps<'/history'>) {
  const member = await requireMemberPage('history', '/history')
  const words = await searchParams
  const filter = readHistoryFilter(words)
  const cursor = readHistoryCursor(words)
  const { timeZone } = await loadFoundry()
  const history = await loadHistory(filter, { cursor, timeZone })
  const isFiltered = Object.values(filter).some((value) => value !== null)
  return (
    <>
      <FoundryNav role={member.role} />
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1>History</h1>
          <p>Who changed what, when, and from which device. Nothing here can be changed or taken away.</p>
        </div>
      </div>
      {(history.lines.length > 0 || isFiltered || cursor !== null) && <Filter filter={filter} history={history} isFiltered={isFiltered} />}
      {history.lines.length === 0 ? (
        <Nothing filter={filter} isFiltered={isFiltered || cursor !== null} isTreeKnown={history.isTreeKnown} />
      ) : (
        <HistoryLines lines={history.lines} context={{ now: systemClock.now(), timeZone, units: member.units, names: history.names }} />
      )}
      {(cursor !== null || history.older !== null) && (
        <nav className="history-pages" aria-label="Pages of the history">
          {cursor !== null && <KeyLink href={historyAddress(filter)}>To the newest</KeyLink>}
          {history.older !== null && <KeyLink href={historyAddress(filter, history.older)}>Older</KeyLink>}
        </nav>
      )}
    </>
  )
}

function Filter({ filter, history, isFiltered }: { filter: HistoryFilter; history: HistoryPage; isFiltered: boolean }) {
  return (
    <Plate className="history-filter">
      {/* Filled in anew with each address: the browser keeps what was typed into a form that stays. */}
      <form key={historyAddress(filter)} action="/history" role="search">
        <label className="label">
          Who
          <select className="input" name="member" defaultValue={filter.memberId ?? ''}>
            <option value="">everybody</option>
            {history.members.map(({ id, name }) => (
              <option key={id} value={id}>
                {name}
              </option>
            ))}
            <option value={NOBODY}>Kilnward itself</option>
          </select>
        </label>
        <label className="label">
          What
          <select className="input" name="kind" defaultValue={filter.kind ?? ''}>
            <option value="">everything</option>
            {history.kinds.map((kind) => (
              <option key={kind}>{kind}</option>
            ))}
          </select>
        </label>
        <label className="label">
          Tree
          <input className="input" name="tree" defaultValue={filter.tag ?? ''} maxLength={20} placeholder="tag" autoComplete="off" />
        </label>
        <label className="label">
          From
          <input className="input" type="date" name="from" defaultValue={filter.fromDay ?? ''} />
        </label>
        <label className="label">
          To
          <input className="input" type="date" name="to" defaultValue={filter.toDay ?? ''} />
        </label>
        <span className="history-keys">
          <button type="submit" className="key key-go">
            Show
          </button>
          {isFiltered && <KeyLink href="/history">Show all</KeyLink>}
        </span>
      </form>
    </Plate>
  )
}

function Nothing({ filter, isFiltered, isTreeKnown }: { filter: HistoryFilter; isFiltered: boolean; isTreeKnown: boolean }) {
  if (!isFiltered) {
    return (
      <EmptyState title="Nothing has happened yet" action={<KeyLink href="/trees">To the trees</KeyLink>}>
        Every dip, move, hold and release will stand here, and every change of a recipe, a place, a person or a setting, with who did it.
      </EmptyState>
    )
  }
  const { fromDay, toDay } = filter
  const isBackwards = fromDay !== null && toDay !== null && fromDay > toDay
  return (
    <p className="history-nothing">
      <Icon name="warning" />
      <span>
        {!isTreeKnown
          ? `There is no tree ${filter.tag}.`
          : isBackwards
            ? 'The first day lies after the last one.'
            : 'Nothing in the history fits these words.'}
      </span>
    </p>
  )
}
