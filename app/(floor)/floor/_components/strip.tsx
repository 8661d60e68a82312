import type { ReactNode } from 'react'
import { Icon } from '@/app/_components/icons'
import { useUnits } from '@/app/_components/units-context'
import { usePress } from '@/app/_components/use-press'
import { bathsByNeed, readingAge, mainRoom, shortBathName } from '@/lib/floor/strip'
import { formatClock, formatDate, formatMoment } from '@/lib/format/local-time'
import { splitName } from '@/lib/format/person-name'
import { formatKelvin, formatPercent, fromSi, oneDecimal, UNIT_SIGNS, wholeNumber } from '@/lib/format/units'
import type { Queue } from '@/lib/queue/contract'
import { PULL_WORDS } from '@/lib/room/drying-pull'

const BATH_LINES = 2

export type StripProps = {
  queue: Queue
  now: number
  memberName: string
  onRoom: () => void
  onWho: () => void
}

/** The state of the shell room across the top: time, air, pull, baths, and whose hand it is. */
export function Strip({ queue, now, memberName, onRoom, onWho }: StripProps) {
  const { timeZone } = queue.foundry
  const { room, silentBeside } = mainRoom(queue)
  const { temp } = useUnits()
  const roomPress = usePress(onRoom)
  const whoPress = usePress(onWho)
  const isSilent = room === undefined || room.measuredAt === null || room.isStale
  const age = room ? readingAge(room, now, timeZone) : 'no sensor yet'
  const { first, rest } = splitName(memberName)
  const name = queue.rooms.length > 1 ? (room?.sensorName ?? 'Room') : 'Room'
  return (
    <header className="strip">
      <h1 className="vh">Floor of {queue.foundry.name}</h1>
      <div className="strip-cell strip-clock">
        <b className="num">{formatClock(now, timeZone)}</b>
        <span>
          {formatDate(now, timeZone)}
          <Pulse queue={queue} />
        </span>
      </div>
      <button type="button" className="strip-cell strip-room" {...roomPress} aria-haspopup="dialog">
        <span className={`strip-label ${isSilent ? 'strip-alarm' : ''}`}>
          {isSilent && <Icon name="warning" />}{' '}
          {isSilent ? (
            `${capital(age)}, ${name}`
          ) : (
            <>
              <span className="strip-full">{name}, </span>
              {age}
            </>
          )}
          {silentBeside > 0 && (
            <b className="strip-alarm">
              {' '}
              <Icon name="warning" /> {silentBeside} silent
            </b>
          )}
        </span>
        <span className="strip-figures">
          <b className="num">
            {room === undefined || isSilent || room.airTempC === null ? '–' : oneDecimal(fromSi(room.airTempC, temp))}
            <small>{UNIT_SIGNS[temp]}</small>
          </b>
          <b className="num">
            {room === undefined || isSilent || room.relHumidityPct === null ? '–' : wholeNumber(room.relHumidityPct)}
            <small>% RH</small>
          </b>
        </span>
      </button>
      <button type="button" className="strip-cell strip-air" {...roomPress} aria-haspopup="dialog">
        <span className="strip-label">Drying pull</span>
        <span className="strip-figures">
          <Pull pull={room?.pull ?? 'not known'} />
          {room && !isSilent && room.pull !== 'not known' && (
            <em>
              {formatPercent(room.speedPct)}
              <span className="strip-wide"> · {formatKelvin(room.wetBulbGapK, temp)}</span>
            </em>
          )}
        </span>
      </button>
      <Baths queue={queue} now={now} />
      {(queue.foundry.isDemoFeedOn || (queue.foundry.hasDemoData && !queue.foundry.isDemo)) && (
        <div className="strip-cell strip-demo">
          <span>
            Demo<span className="strip-wide"> {queue.foundry.isDemo ? 'feed' : 'data'}</span>
          </span>
        </div>
      )}
      <button type="button" className="strip-cell strip-who" {...whoPress} aria-haspopup="dialog">
        <span className="strip-label">Signed in</span>
        <b className="num" title={memberName}>
          {first}
          {rest !== '' && <span className="strip-full"> {rest}</span>}
        </b>
      </button>
    </header>
  )
}

/** The watcher's pulse: beats or does not. When it has stopped, the alarm under the strip says since when. */
function Pulse({ queue }: { queue: Queue }) {
  const { isAlive, pulseAt } = queue.worker
  if (!isAlive || pulseAt === null) return null
  return (
    <i className="strip-pulse" title={`Watched, last look ${formatClock(pulseAt, queue.foundry.timeZone)}`}>
      <Icon name="pulse" />
      <span className="vh">Watched, last look {formatClock(pulseAt, queue.foundry.timeZone)}</span>
    </i>
  )
}

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1)

function Pull({ pull }: { pull: Queue['rooms'][number]['pull'] }) {
  const isGood = pull === 'good'
  const words = PULL_WORDS[pull]
  // 'Too dry for face coats' is 'Too dry' where there is no room for whom.
  const [short = words, whom] = words.split(/(?= for )/)
  return (
    <b className={`strip-pull ${isGood ? 'strip-good' : 'strip-alarm'} ${words.length > 8 ? 'strip-pull-long' : ''}`}>
      <Icon name={isGood ? 'check' : 'warning'} /> {short}
      {whom !== undefined && <span className="strip-far">{whom}</span>}
    </b>
  )
}

function Baths({ queue, now }: { queue: Queue; now: number }) {
  const { timeZone } = queue.foundry
  const baths = bathsByNeed(queue.baths)
  const lines = baths.length > BATH_LINES ? baths.slice(0, BATH_LINES - 1) : baths
  const rest = baths.length - lines.length
  const restToStir = baths.slice(lines.length).filter((bath) => !bath.isStirredToday).length
  return (
    <div className="strip-cell strip-baths">
      <h2 className="vh">Baths</h2>
      <ul>
        {baths.length === 0 && <li>No bath yet</li>}
        {lines.map((bath) => (
          <li key={bath.id} className={bath.isStirredToday ? 'strip-good' : 'strip-alarm'}>
            <Icon name={bath.isStirredToday ? 'check' : 'warning'} /> {shortBathName(bath.name)}:{' '}
            {bath.isStirredToday && bath.stirredAt !== null ? (
              <>
                <span className="strip-near">stirred </span>
                {formatClock(bath.stirredAt, timeZone)}
              </>
            ) : (
              stirWords(bath.stirredAt, now, timeZone)
            )}
          </li>
        ))}
        {rest > 0 && (
          <li className={restToStir > 0 ? 'strip-alarm' : 'strip-good'}>
            <Icon name={restToStir > 0 ? 'warning' : 'check'} /> {rest} more{restToStir > 0 ? `, ${restToStir} to stir` : ', stirred'}
          </li>
        )}
      </ul>
    </div>
  )
}

function stirWords(stirredAt: number | null, now: number, timeZone: string): ReactNode {
  if (stirredAt === null) return 'stir'
  return (
    <>
      stir, <span className="strip-far">last </span>
      {formatMoment(stirredAt, now, timeZone)}
    </>
  )
}
