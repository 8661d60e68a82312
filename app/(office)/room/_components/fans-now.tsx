'use client'

import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { useOperation } from '@/app/(office)/_components/use-operation'
import type { FanState } from '@/lib/drying/types'
import { fanReason } from '@/lib/room/fan-words'
import type { PlaceFans } from '@/lib/room/fans-contract'
import type { PlaceNow } from '@/lib/room/room-contract'
import './fans-now.css'

type Moment = { now: number; timeZone: string }

/** The air speed at each place as it is now, and the key that says that its fans were switched. */
export function FansNow({ places, maySwitch, ...moment }: { places: readonly PlaceNow[]; maySwitch: boolean } & Moment) {
  const without = places.filter(({ fans }) => fans === null)
  return (
    <section className="plate">
      <header>
        <h2>Air at the places</h2>
        <p>as the drying clock counts it now</p>
      </header>
      <ul className="fan-places">
        {places.map((place) => place.fans && <FanPlace key={place.id} place={place} fans={place.fans} maySwitch={maySwitch} {...moment} />)}
      </ul>
      {without.length > 0 && <p className="fan-none">Without fans: {without.map(({ name, speed }) => `${name} ${speed}`).join(', ')}.</p>}
    </section>
  )
}

function FanPlace({ place, fans, maySwitch, ...moment }: { place: PlaceNow; fans: PlaceFans; maySwitch: boolean } & Moment) {
  const operation = useOperation(`/api/v1/places/${place.id}/fans`)
  const say = (state: FanState) => () => operation.send({ state })
  return (
    <li>
      <h3>
        {place.name}
        <span className="text-soot">
          {place.treeCount} {place.treeCount === 1 ? 'tree' : 'trees'}
        </span>
      </h3>
      <p className="fan-state">
        <b className={fans.isOn ? 'text-verdigris-ink' : undefined}>
          <Icon name={fans.isOn ? 'check' : 'minus'} /> Fans {fans.isOn ? 'on' : 'off'}
        </b>
        <span className="num">{place.speed}</span>
      </p>
      <p className="text-soot">{fanReason(fans, moment)}</p>
      {maySwitch && (
        <div className="fan-keys">
          <Key
            onPress={say(fans.isOn ? 'off' : 'on')}
            isOff={operation.isPending}
            aria-label={`${place.name}: fans are ${fans.isOn ? 'off' : 'on'} now`}
          >
            Fans are {fans.isOn ? 'off' : 'on'} now
          </Key>
          {fans.said !== null && (
            <Key tone="quiet" onPress={say('timetable')} isOff={operation.isPending} aria-label={`${place.name}: by the timetable again`}>
              By the timetable
            </Key>
          )}
        </div>
      )}
      <p role="status" className="fan-problem">
        {operation.problem !== null && (
          <>
            <Icon name="warning" /> {operation.problem}
          </>
        )}
      </p>
    </li>
  )
}
