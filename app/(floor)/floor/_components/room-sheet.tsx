'use client'

import { useState, type FormEvent, type ReactNode } from 'react'
import { formatMoment } from '@/lib/format/local-time'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { useUnits } from '@/app/_components/units-context'
import { checkDial, type DialErrors } from '@/lib/floor/dip-draft'
import { readingAge, roomsByWorry } from '@/lib/floor/strip'
import { formatKelvin, formatPercent, formatTemperature, UNIT_SIGNS } from '@/lib/format/units'
import type { Queue, QueueRoom } from '@/lib/queue/contract'
import { PULL_WORDS } from '@/lib/room/drying-pull'
import { newOperationId } from '../_queries/operation-id'
import { refusalWords } from '../_queries/request-json'
import { postTypedReading } from '../_queries/writes'
import { FanLine } from './fan-line'
import { Sheet } from './sheet'
import { SheetProblem } from './sheet-problem'

export type RoomSheetProps = {
  queue: Queue
  now: number
  canRead: boolean
  canSwitchFans: boolean
  onClose: () => void
  onSaid: (words: string) => void
}

/** The air of every room; where no sensor hangs, the dial of the wall hygrometer to fill in. */
export function RoomSheet({ queue, now, canRead, canSwitchFans, onClose, onSaid }: RoomSheetProps) {
  const rooms = roomsByWorry(queue)
  return (
    <Sheet label="Air of the rooms" heading={rooms.length === 1 ? 'Air of the room' : 'Air of the rooms'} isTop onClose={onClose}>
      <div className="room-lines min-h-0 overflow-y-auto">
        {rooms.length === 0 && <p className="text-22">No sensor yet. Until there is one, nobody knows how fast coats dry.</p>}
        {rooms.map((room) => (
          <RoomLine key={room.sensorId} room={room} queue={queue} now={now} canRead={canRead} onSaid={onSaid}>
            {queue.places
              .filter((place) => place.sensorId === room.sensorId)
              .map(
                (place) =>
                  place.fans && (
                    <FanLine key={place.id} place={place} fans={place.fans} queue={queue} canSwitch={canSwitchFans} onSaid={onSaid} />
                  ),
              )}
          </RoomLine>
        ))}
        <p className="text-20 text-soot">{watchWords(queue, now)}</p>
      </div>
    </Sheet>
  )
}

/** Whether anybody is told when a coat is dry. */
function watchWords({ worker, foundry }: Queue, now: number): string {
  if (worker.pulseAt === null) return 'The watcher has not started: no calls are sent.'
  const at = formatMoment(worker.pulseAt, now, foundry.timeZone)
  return worker.isAlive ? `Watched: last look at the floor ${at}, calls are sent.` : `The watcher stopped ${at}: no calls are sent.`
}

function RoomLine({
  room,
  queue,
  now,
  canRead,
  onSaid,
  children,
}: {
  room: QueueRoom
  queue: Queue
  now: number
  canRead: boolean
  onSaid: (words: string) => void
  children: ReactNode
}) {
  const { temp } = useUnits()
  const isGood = room.pull === 'good'
  const placeIds = new Set(queue.places.filter((place) => place.sensorId === room.sensorId).map((place) => place.id))
  const trees = queue.trees.filter((tree) => placeIds.has(tree.place.id)).length
  return (
    <section className="room-line" aria-label={room.sensorName}>
      <div>
        <h3>{room.sensorName}</h3>
        <span>
          {trees} {trees === 1 ? 'tree' : 'trees'} here
        </span>
        <span className={room.isStale ? 'state state-ochre' : 'text-soot'}>
          {room.isStale && <Icon name="warning" />}
          {readingAge(room, now, queue.foundry.timeZone)}
          {room.source === 'typed' && ', typed'}
        </span>
      </div>
      <div>
        {room.isStale && room.airTempC !== null && <span>last</span>}
        <b className="num">{formatTemperature(room.airTempC, temp)}</b>
        <b className="num">{formatPercent(room.relHumidityPct)} RH</b>
        <span className={`state ${isGood ? 'state-verdigris' : 'state-ochre'}`}>
          <Icon name={isGood ? 'check' : 'warning'} />
          Drying pull: {PULL_WORDS[room.pull]}
        </span>
        {!room.isStale && (
          <span>
            {formatPercent(room.speedPct)} of reference speed, {formatKelvin(room.wetBulbGapK, temp)} to the wet bulb
          </span>
        )}
      </div>
      {room.isTypedOnly && canRead && <TypedReading room={room} onSaid={onSaid} />}
      {children}
    </section>
  )
}

function TypedReading({ room, onSaid }: { room: QueueRoom; onSaid: (words: string) => void }) {
  const unit = useUnits().temp
  const [temp, setTemp] = useState('')
  const [humidity, setHumidity] = useState('')
  const [errors, setErrors] = useState<DialErrors>({})
  const [trouble, setTrouble] = useState<string>()
  const [isSending, setIsSending] = useState(false)
  // One id for one pair of numbers, however often it has to be sent.
  const [attempt, setAttempt] = useState<{ numbers: string; operationId: string } | null>(null)

  const send = async (event: FormEvent) => {
    event.preventDefault()
    if (isSending) return
    const { errors: wrong, room: air } = checkDial(temp, humidity, unit)
    setErrors(wrong)
    setTrouble(undefined)
    if (!air) return
    const numbers = JSON.stringify(air)
    const operationId = attempt?.numbers === numbers ? attempt.operationId : newOperationId()
    setAttempt({ numbers, operationId })
    setIsSending(true)
    const outcome = await postTypedReading({ operationId, sensorId: room.sensorId, ...air })
    setIsSending(false)
    if (outcome.kind === 'done') {
      setTemp('')
      setHumidity('')
      setAttempt(null)
      onSaid(`${room.sensorName}: ${formatTemperature(air.airTempC, unit)}, ${formatPercent(air.relHumidityPct)} RH noted.`)
      return
    }
    if (outcome.kind === 'refused') setAttempt(null)
    setTrouble(outcome.kind === 'refused' ? refusalWords(outcome.status, outcome.problem) : `Not noted yet. ${outcome.detail} Try again.`)
  }

  const wrong = [errors.airTempC, errors.relHumidityPct].filter((error) => error !== undefined)
  const errorId = `typed-${room.sensorId}-error`
  const dial = (label: string, sign: string, value: string, isWrong: boolean, onChange: (text: string) => void) => (
    <label className="wall-dial" data-wrong={isWrong}>
      <span>{label}</span>
      <span>
        <input
          inputMode="decimal"
          autoComplete="off"
          value={value}
          aria-invalid={isWrong || undefined}
          aria-describedby={errorId}
          onChange={(event) => onChange(event.target.value)}
        />
        <small className="num">{sign}</small>
      </span>
    </label>
  )
  return (
    <>
      <form onSubmit={(event) => void send(event)} noValidate aria-label={`Wall hygrometer, ${room.sensorName}`}>
        {dial('Temperature', UNIT_SIGNS[unit], temp, errors.airTempC !== undefined, setTemp)}
        {dial('Humidity', '% RH', humidity, errors.relHumidityPct !== undefined, setHumidity)}
        <Key type="submit" size={64} tone="go" isOff={isSending}>
          {isSending ? 'Noting it' : 'Note the reading'}
        </Key>
      </form>
      <div id={errorId} aria-live="polite">
        {wrong.map((error) => (
          <p key={error} className="wall-error">
            <Icon name="warning" />
            <span>{error}</span>
          </p>
        ))}
      </div>
      {trouble && <SheetProblem title="Reading not noted" detail={trouble} />}
    </>
  )
}
