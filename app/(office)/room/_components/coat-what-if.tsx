'use client'

import { keepPreviousData, useQuery } from '@tanstack/react-query'
import { useState } from 'react'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { DialKeys } from '@/app/(office)/room/_components/dial-keys'
import { useResting } from '@/app/(office)/room/_components/use-resting'
import { estimateAnswer, type EstimateAnswer } from '@/lib/drying/estimate-contract'
import { UNIT_SIGNS, formatKelvin, formatTemperature, oneDecimal, wholeNumber, type TempUnit } from '@/lib/format/units'
import { pullWord } from '@/lib/room/drying-pull'
import {
  AIR_DIAL,
  dialledTemp,
  flagWords,
  HUMIDITY_DIAL,
  NEED_DIAL,
  shownTemp,
  tempDial,
  whatIfBody,
  whatIfPair,
  type WhatIf as Choice,
  type WhatIfRoom,
} from '@/lib/room/coat-what-if'

export type CoatWhatIfProps = {
  start: Choice
  room: WhatIfRoom
  tempUnit: TempUnit
  places: readonly { name: string; airSpeedMps: number }[]
}

async function ask(body: Record<string, unknown>): Promise<EstimateAnswer> {
  const response = await fetch('/api/v1/drying/estimate', {
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify(body),
  })
  if (!response.ok) throw new Error(`The estimate was refused: ${response.status}.`)
  return estimateAnswer.parse(await response.json())
}

/** How fast a coat would dry in another air: every dial goes by keys, by arrows or by drag. Nothing is changed by it. */
export function CoatWhatIf({ start, room, tempUnit, places }: CoatWhatIfProps) {
  const [choice, setChoice] = useState(start)
  const resting = useResting(choice)
  const { data, error, isFetching } = useQuery({
    queryKey: ['coat what-if', resting, room],
    queryFn: async () => ({ answer: await ask(whatIfBody(resting, room, WHEN)), choice: resting }),
    placeholderData: keepPreviousData,
    staleTime: Infinity,
    refetchOnWindowFocus: false,
  })
  const set = (change: Partial<Choice>) => setChoice((before) => ({ ...before, ...change }))
  const temperature = tempDial(tempUnit)
  return (
    <div className="what-if">
      <div className="what-if-dials">
        <DialKeys
          name="Temperature"
          dial={temperature}
          value={shownTemp(choice.airTempC, tempUnit)}
          words={`${oneDecimal(shownTemp(choice.airTempC, tempUnit))} ${UNIT_SIGNS[tempUnit]}`}
          onChange={(shown) => set({ airTempC: dialledTemp(shown, tempUnit) })}
        />
        <DialKeys
          name="Humidity"
          dial={HUMIDITY_DIAL}
          value={choice.relHumidityPct}
          words={`${wholeNumber(choice.relHumidityPct)} % RH`}
          onChange={(relHumidityPct) => set({ relHumidityPct })}
        />
        <DialKeys
          name="Air at the tree"
          dial={AIR_DIAL}
          value={choice.airSpeedMps}
          words={`${oneDecimal(choice.airSpeedMps)} m/s`}
          hint={places.map((place) => `${place.name} ${oneDecimal(place.airSpeedMps)}`).join(', ')}
          onChange={(airSpeedMps) => set({ airSpeedMps })}
        />
        <DialKeys
          name="Need of the coat"
          dial={NEED_DIAL}
          value={choice.referenceHours}
          words={`${oneDecimal(choice.referenceHours)} reference hours`}
          hint={`How long this coat takes in the recipe’s room: ${formatTemperature(21, tempUnit)}, 50 % RH, 1.0 m/s. The recipe says it of each coat.`}
          onChange={(referenceHours) => set({ referenceHours })}
        />
        <fieldset className="what-if-coat">
          <legend className="label">Which coat</legend>
          <Key isChosen={choice.isFaceCoat} onPress={() => set({ isFaceCoat: true })}>
            Coat 1 or 2
          </Key>
          <Key isChosen={!choice.isFaceCoat} onPress={() => set({ isFaceCoat: false })}>
            A later one
          </Key>
        </fieldset>
      </div>
      <div className="what-if-answer" aria-live="polite" aria-busy={isFetching}>
        {data ? (
          <Answer answer={data.answer} tempUnit={tempUnit} />
        ) : (
          <p className="text-soot">{error ? 'No answer from the server. Turn a dial to ask again.' : 'Working it out.'}</p>
        )}
      </div>
    </div>
  )
}

/** Lengths of time are wanted, so any moment does; the same one keeps the answer the same for the same dials. */
const WHEN = Date.UTC(2026, 0, 1, 12)

function Answer({ answer, tempUnit }: { answer: EstimateAnswer; tempUnit: TempUnit }) {
  const pair = whatIfPair(answer, WHEN)
  const speed = answer.points[0]?.speed ?? 0
  const gapK = answer.air?.wetBulbGapK ?? 0
  // A steady air that is damp at the likely time is so at the safe one.
  const flags = answer.flags.filter((flag) => flag.code !== 'damp' || flag.at === 'likely')
  return (
    <>
      <p className="what-if-pair">
        likely <span className="num">{pair.likely}</span>, safe <span className="num">{pair.safe}</span>
      </p>
      <p>
        {pullWord({ roomFactor: speed, wetBulbGapK: gapK })}: <span className="num">{wholeNumber(speed * 100)} %</span> of recipe speed,{' '}
        drying pull {formatKelvin(gapK, tempUnit)}
      </p>
      {flags.length === 0 ? (
        <p className="form-done">
          <Icon name="check" />
          <span>Within the limits of chill, swing and heat.</span>
        </p>
      ) : (
        <ul className="warning-list">
          {flags.map((flag) => (
            <li key={flag.code} className={flag.code === 'chill' && flag.level === 'stop' ? 'text-furnace-ink' : 'text-ochre-ink'}>
              <Icon name="warning" />
              <span>{flagWords(flag, tempUnit)}</span>
            </li>
          ))}
        </ul>
      )}
    </>
  )
}
