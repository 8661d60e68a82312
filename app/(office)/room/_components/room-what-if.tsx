'use client'

import { keepPreviousData, useQuery } from '@tanstack/react-query'
import { useState } from 'react'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { DialKeys } from '@/app/(office)/room/_components/dial-keys'
import { useResting } from '@/app/(office)/room/_components/use-resting'
import { WhatIfTable } from '@/app/(office)/room/_components/what-if-table'
import { TIMES_NOT_CALIBRATED } from '@/lib/format/time-pair'
import { formatMoment } from '@/lib/format/local-time'
import { UNIT_SIGNS, formatTemperature, oneDecimal, wholeNumber, type TempUnit } from '@/lib/format/units'
import { AIR_DIAL, dialledTemp, HUMIDITY_DIAL, shownTemp, tempDial } from '@/lib/room/coat-what-if'
import { roomWhatIfAnswer, type RoomWhatIf as Choice, type RoomWhatIfAnswer } from '@/lib/room/room-what-if-contract'
import { harmWords, isTurned, proposalWords } from '@/lib/room/room-what-if-words'

export type RoomWhatIfProps = {
  sensorId: number
  /** As the room is now: where the dials stand until they are turned. */
  air: { airTempC: number; relHumidityPct: number; airSpeedMps: number }
  places: readonly { id: string; name: string; airSpeedMps: number; hasFansToLeaveOn: boolean }[]
  closesAt: number | null
  opensAt: number
  now: number
  timeZone: string
  tempUnit: TempUnit
}

const AS_IT_COMES: Choice = { until: 'opening' }

async function ask(sensorId: number, choice: Choice): Promise<RoomWhatIfAnswer> {
  const response = await fetch(`/api/v1/rooms/${sensorId}/what-if`, {
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify(choice),
  })
  if (!response.ok) throw new Error(`The what-if was refused: ${response.status}.`)
  return roomWhatIfAnswer.parse(await response.json())
}

/** Another air for the whole room, and what it does to every tree in it. Nothing is changed by it. */
export function RoomWhatIf({ sensorId, air, places, closesAt, opensAt, now, timeZone, tempUnit }: RoomWhatIfProps) {
  const [choice, setChoice] = useState(AS_IT_COMES)
  const resting = useResting(choice)
  const { data, error, isFetching } = useQuery({
    // The page is made anew every minute: so are the times that are compared.
    queryKey: ['room what-if', sensorId, resting, now],
    queryFn: async () => ({ answer: await ask(sensorId, resting), choice: resting }),
    placeholderData: keepPreviousData,
    enabled: isTurned(resting),
    staleTime: Infinity,
    refetchOnWindowFocus: false,
  })
  const set = (change: Partial<Choice>) => setChoice((before) => ({ ...before, ...change }))
  const isAsItComes = !isTurned(choice)
  const dialled = shownTemp(choice.airTempC ?? air.airTempC, tempUnit)
  const fans = places.filter((place) => place.hasFansToLeaveOn)
  const speeds = places.map((place) => `${place.name} ${oneDecimal(place.airSpeedMps)}`).join(', ')

  const withFans = (placeId: string) => {
    const on = choice.fansOnAt ?? []
    const fansOnAt = on.includes(placeId) ? on.filter((id) => id !== placeId) : [...on, placeId]
    const { airSpeedMps: _airSpeedMps, fansOnAt: _fansOnAt, ...rest } = choice
    setChoice(fansOnAt.length === 0 ? rest : { ...rest, fansOnAt })
  }
  const withSpeed = (airSpeedMps: number) => {
    const { fansOnAt: _fansOnAt, ...rest } = choice
    setChoice({ ...rest, airSpeedMps })
  }

  return (
    <div className="room-what-if">
      <div className="room-dials">
        <DialKeys
          name="Temperature"
          dial={tempDial(tempUnit)}
          value={dialled}
          words={
            choice.airTempC === undefined
              ? `${formatTemperature(air.airTempC, tempUnit)} now`
              : `${oneDecimal(dialled)} ${UNIT_SIGNS[tempUnit]}`
          }
          onChange={(shown) => set({ airTempC: dialledTemp(shown, tempUnit) })}
        />
        <DialKeys
          name="Humidity"
          dial={HUMIDITY_DIAL}
          value={choice.relHumidityPct ?? air.relHumidityPct}
          words={`${wholeNumber(choice.relHumidityPct ?? air.relHumidityPct)} % RH${choice.relHumidityPct === undefined ? ' now' : ''}`}
          onChange={(relHumidityPct) => set({ relHumidityPct })}
        />
        <DialKeys
          name="Air at the trees"
          dial={AIR_DIAL}
          value={choice.airSpeedMps ?? air.airSpeedMps}
          words={choice.airSpeedMps === undefined ? 'as at each place' : `${oneDecimal(choice.airSpeedMps)} m/s`}
          hint={speeds === '' ? undefined : `With fans on: ${speeds} m/s`}
          onChange={withSpeed}
        />
      </div>
      <div className="what-if-keys">
        {fans.length > 0 && (
          <fieldset className="what-if-coat">
            <legend className="label">Fans stay on at</legend>
            {fans.map((place) => (
              <Key key={place.id} isChosen={choice.fansOnAt?.includes(place.id) ?? false} onPress={() => withFans(place.id)}>
                {place.name}
              </Key>
            ))}
          </fieldset>
        )}
        <fieldset className="what-if-coat">
          <legend className="label">For how long</legend>
          {closesAt !== null && (
            <Key isChosen={choice.until === 'closing'} onPress={() => set({ until: 'closing' })}>
              Until closing, {formatMoment(closesAt, now, timeZone)}
            </Key>
          )}
          <Key isChosen={choice.until === 'opening' || closesAt === null} onPress={() => set({ until: 'opening' })}>
            Until the next opening, {formatMoment(opensAt, now, timeZone)}
          </Key>
        </fieldset>
        <Key tone="quiet" isOff={isAsItComes} onPress={() => setChoice({ until: choice.until })}>
          Back to the air as it comes
        </Key>
      </div>
      <div className="what-if-answer room-answer" aria-live="polite" aria-busy={isFetching}>
        {isAsItComes ? (
          <p className="text-soot">
            Turn a dial: what is not turned stays as it is forecast. Every tree’s times, before and after, and what that air would do to the
            wax stand here at once.
          </p>
        ) : data ? (
          <Verdict
            answer={data.answer}
            proposal={proposalWords(
              { choice: data.choice, relHumidityNowPct: air.relHumidityPct, placeNames: new Map(places.map(({ id, name }) => [id, name])) },
              data.answer,
              { tempUnit, timeZone },
            )}
            timeZone={timeZone}
            tempUnit={tempUnit}
          />
        ) : (
          <p className="text-soot">{error ? 'No answer from the server. Turn a dial to ask again.' : 'Working it out.'}</p>
        )}
      </div>
      {!isAsItComes && data && <WhatIfTable answer={data.answer} timeZone={timeZone} />}
    </div>
  )
}

type VerdictProps = { answer: RoomWhatIfAnswer; proposal: string | null; timeZone: string; tempUnit: TempUnit }

function Verdict({ answer, proposal, timeZone, tempUnit }: VerdictProps) {
  const { beforeClosing, beforeOpening, closesAt, opensAt, now, harms, trees } = answer
  if (trees.length === 0 && harms.length === 0) return <p className="text-soot">No coat is drying in this room.</p>
  const count = ({ before, after }: { before: number; after: number }) => (
    <>
      <span className="num">{before}</span> → <span className="num">{after}</span> of {trees.length}
    </>
  )
  return (
    <>
      {harms.length > 0 ? (
        <>
          <p className="what-if-no">
            <Icon name="warning" />
            <span>Not this air: it harms the wax.</span>
          </p>
          <ul className="warning-list">
            {harms.map((shared) => (
              <li key={shared.harm.code} className="text-furnace-ink">
                <Icon name="warning" />
                <span>
                  {harmWords(shared, tempUnit)}
                  {shared.harm.from > now && ` From ${formatMoment(shared.harm.from, now, timeZone)}.`}
                </span>
              </li>
            ))}
          </ul>
        </>
      ) : (
        <p className="what-if-yes">
          {proposal ? (
            <>
              <Icon name="check" />
              <b>{proposal}</b>
            </>
          ) : (
            'Within the limits of chill, swing and heat, and nothing is won by it.'
          )}
        </p>
      )}
      <p>
        Dry{' '}
        {closesAt !== null && beforeClosing !== null && (
          <>
            before closing ({formatMoment(closesAt, now, timeZone)}): {count(beforeClosing)};{' '}
          </>
        )}
        before the next opening ({formatMoment(opensAt, now, timeZone)}): {count(beforeOpening)}.
        {trees.some((tree) => tree.isUncalibrated) && <span className="text-soot"> {upperFirst(TIMES_NOT_CALIBRATED)}.</span>}
      </p>
    </>
  )
}

const upperFirst = (words: string) => words.replace(/^./, (first) => first.toUpperCase())
