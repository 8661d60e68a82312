'use client'

import { Field, SelectField } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { FanWeek } from '@/app/(office)/settings/places/_components/fan-week'
import { addPlaceAction, changePlaceAction } from '@/app/(office)/settings/places/actions'
import '@/app/(office)/settings/settings.css'
import type { PlaceFormValues } from '@/lib/room/place-input'

export type PlaceFormProps = {
  /** The sensors in use. */
  sensors: readonly { id: number; name: string }[]
  /** A known place; a new one without. */
  place?: { id: string; values: PlaceFormValues }
  onDone?: () => void
}

const NEW_PLACE: PlaceFormValues = { name: '', sensorId: '', airSpeedFansOnMps: '', airSpeedFansOffMps: '', fans: [] }

/** The form of a place where trees hang. It stands alone on any page. */
export function PlaceForm({ sensors, place, onDone }: PlaceFormProps) {
  const form = useKeptForm(place ? changePlaceAction.bind(null, place.id) : addPlaceAction, onDone)
  const [only] = sensors
  const values = place?.values ?? { ...NEW_PLACE, sensorId: sensors.length === 1 && only ? String(only.id) : '' }
  return (
    <form {...form.formProps} className="settings-form">
      <div className="form-grid">
        <Field
          name="name"
          label="Name"
          defaultValue={values.name}
          error={form.errorOf('name')}
          hint="As people say it: Rack A, by the north wall."
          maxLength={40}
          autoComplete="off"
        />
        <SelectField
          name="sensorId"
          label="Sensor that reads its air"
          defaultValue={values.sensorId}
          error={form.errorOf('sensorId')}
          hint="The one that hangs in the same air."
        >
          <option value="" disabled>
            Choose a sensor
          </option>
          {sensors.map((sensor) => (
            <option key={sensor.id} value={sensor.id}>
              {sensor.name}
            </option>
          ))}
        </SelectField>
        <Field
          name="airSpeedFansOnMps"
          label="Air speed, fans on"
          unit="m/s"
          inputMode="decimal"
          defaultValue={values.airSpeedFansOnMps}
          error={form.errorOf('airSpeedFansOnMps')}
          hint="Measured at the tree with a vane or hot-wire meter, not at the fan. 0 to 20."
          autoComplete="off"
        />
        <Field
          name="airSpeedFansOffMps"
          label="Air speed, fans off"
          unit="m/s"
          inputMode="decimal"
          defaultValue={values.airSpeedFansOffMps}
          error={form.errorOf('airSpeedFansOffMps')}
          hint="Still air is about 0.1. A place without fans has the same speed twice."
          autoComplete="off"
        />
      </div>
      <FanWeek fans={values.fans} errorOf={form.errorOf} />
      <div className="form-foot">
        <Key type="submit" tone="go" isOff={form.isPending}>
          {place ? 'Save the place' : 'Add the place'}
        </Key>
        <FormMessage state={form.state} isLongForm />
      </div>
    </form>
  )
}
