'use client'

import { Icon } from '@/app/_components/icons'
import { AddPlate } from '@/app/(office)/settings/_components/add-plate'
import { ActForm } from '@/app/(office)/settings/_components/act-form'
import { RetiredFold } from '@/app/(office)/settings/_components/retired-fold'
import { RowPlate } from '@/app/(office)/settings/_components/row-plate'
import { PlaceForm } from '@/app/(office)/settings/places/_components/place-form'
import { retirePlaceAction, reusePlaceAction } from '@/app/(office)/settings/places/actions'
import { nameList } from '@/lib/format/name-list'
import { wholeNumber } from '@/lib/format/units'
import type { PlaceList, PlaceRow } from '@/lib/queries/place-list'
import { hasFans, measuredWords } from '@/lib/room/place-air'
import { placeFormValues } from '@/lib/room/place-input'
import { weekWords } from '@/lib/schedule/week-words'

/** The places in use with their forms, the key that adds one, and those that are retired. */
export function PlaceRows({ places: { inUse, retired, sensors, today } }: { places: PlaceList }) {
  return (
    <>
      <AddPlate
        words="Add a place"
        empty={
          inUse.length > 0
            ? null
            : {
                title: 'No place yet',
                text: 'Every rack, rail and corner where trees hang stands here, with its air. The drying clock needs to know how fast the air is where a shell dries.',
              }
        }
        renderForm={(onDone) => <PlaceForm sensors={sensors} onDone={onDone} />}
      />
      <ul className="settings-rows">
        {inUse.map((place) => (
          <RowPlate
            key={place.id}
            title={place.name}
            isDemo={place.isDemo}
            line={`air read by ${place.sensor.name}`}
            form={
              <PlaceForm
                sensors={sensors}
                place={{ id: place.id, values: placeFormValues({ ...place, sensorId: place.sensor.id }), trees: place.trees }}
              />
            }
            keys={
              <ActForm action={() => retirePlaceAction(place.id)} label={`Retire ${place.name}`}>
                Retire
              </ActForm>
            }
          >
            <PlaceWords place={place} today={today} />
          </RowPlate>
        ))}
      </ul>
      <RetiredFold count={retired.length}>
        {retired.map((place) => (
          <RowPlate
            key={place.id}
            title={place.name}
            isDemo={place.isDemo}
            line="retired"
            keys={
              <ActForm action={() => reusePlaceAction(place.id)} label={`Use ${place.name} again`}>
                Use again
              </ActForm>
            }
          >
            <PlaceWords place={place} today={today} />
          </RowPlate>
        ))}
      </RetiredFold>
    </>
  )
}

function PlaceWords({ place, today }: { place: PlaceRow; today: string }) {
  const measured = measuredWords(place, today)
  const fans = place.fanHours.map(({ weekday, onMinute, offMinute }) => ({ weekday, fromMinute: onMinute, toMinute: offMinute }))
  return (
    <dl className="facts">
      <div>
        <dt>Air speed</dt>
        <dd>
          {hasFans(place)
            ? `${place.airSpeedFansOnMps} m/s with the fans on, ${place.airSpeedFansOffMps} m/s with them off`
            : `${place.airSpeedFansOffMps} m/s`}
          {hasFans(place) && place.fanDuty < 1 && <>; while on they blow here for {wholeNumber(place.fanDuty * 100)} % of the time</>}
        </dd>
      </div>
      <div>
        <dt>Known from</dt>
        <dd className={measured.isDue ? 'text-ochre-ink' : undefined}>
          {measured.isDue && <Icon name="warning" />} {measured.text}
        </dd>
      </div>
      <div>
        <dt>Fans run</dt>
        <dd>
          {weekWords(fans, 'never')}
          {fans.length === 0 && hasFans(place) && <>, unless somebody says on the floor or the Room page that they are on.</>}
        </dd>
      </div>
      <div>
        <dt>Hanging now</dt>
        <dd>{place.trees.length === 0 ? 'nothing' : nameList(place.trees)}</dd>
      </div>
    </dl>
  )
}
