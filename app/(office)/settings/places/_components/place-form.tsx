'use client'

import { Field, SelectField } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { FanWeek } from '@/app/(office)/settings/places/_components/fan-week'
import { addPlaceAction, changePlaceAction } from '@/app/(office)/settings/places/actions'
import '@/app/(office)/settings/settings.css'
import { nameList } from '@/lib/format/name-list'
import { AIR_METERS } from '@/lib/room/place-air'
import type { PlaceFormValues } from '@/lib/room/place-input'

export type PlaceFormProps = {
  /** The sensors in use. */
  sensors: readonly { id: number; name: string }[]
  /** A known place with the tags that hang there; a new one without. */
  place?: { id: string; values: PlaceFormValues; trees: readonly string[] }
  onDone?: () => void
}

const NEW_PLACE: PlaceFormValues = {
  name: '',
  sensorId: '',
  airSpeedFansOnMps: '',
  airSpeedFansOffMps: '',
  fanDuty: '100',
  airMeasuredOn: '',
  airMeasuredWith: '',
  airMeasuredBy: '',
  fans: [],
}

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
        <Field
          name="fanDuty"
          label="While on, the fans blow here for"
          unit="%"
          inputMode="decimal"
          defaultValue={values.fanDuty}
          error={form.errorOf('fanDuty')}
          hint="Of the time. 100 where they blow all the time; less where a fan swings or goes in cycles."
          autoComplete="off"
        />
        <Field
          name="airMeasuredOn"
          label="Air speeds measured on"
          type="date"
          defaultValue={values.airMeasuredOn}
          error={form.errorOf('airMeasuredOn')}
          hint="At the tree, in the place of a shell. Empty: they are an estimate. Other speeds are another measurement."
        />
        <SelectField
          name="airMeasuredWith"
          label="Measured with"
          defaultValue={values.airMeasuredWith}
          error={form.errorOf('airMeasuredWith')}
          hint="Slow air is below what most vanes turn in: a hot wire reads it."
        >
          <option value="">Not known</option>
          {AIR_METERS.map((meter) => (
            <option key={meter} value={meter}>
              {meter}
            </option>
          ))}
        </SelectField>
        <Field
          name="airMeasuredBy"
          label="Measured by"
          defaultValue={values.airMeasuredBy}
          error={form.errorOf('airMeasuredBy')}
          hint="Who can be asked how."
          maxLength={80}
          autoComplete="off"
        />
      </div>
      <FanWeek fans={values.fans} errorOf={form.errorOf} />
      {place && <SinceChoice trees={place.trees} error={form.errorOf('since')} />}
      <div className="form-foot">
        <Key type="submit" tone="go" isOff={form.isPending}>
          {place ? 'Save the place' : 'Add the place'}
        </Key>
        <FormMessage state={form.state} isLongForm />
      </div>
    </form>
  )
}

/** Asked only where something hangs: with another air the past of its coats could be told in two ways. */
function SinceChoice({ trees, error }: { trees: readonly string[]; error: string | undefined }) {
  if (trees.length === 0) return <input type="hidden" name="since" value="now" />
  return (
    <fieldset className="tick-set">
      <legend className="label">
        {nameList(trees)} {trees.length === 1 ? 'hangs' : 'hang'} here. Since when is the air as you say?
      </legend>
      <label className="tick">
        <input type="radio" name="since" value="now" defaultChecked />
        <span>From now on: what has dried so far stands, and the rest dries in the new air.</span>
      </label>
      <label className="tick">
        <input type="radio" name="since" value="always" />
        <span>It was so before, and the figures here were wrong: work out again every coat that dries here, from its dip.</span>
      </label>
      <p className="field-hint">
        The likely and safe times of these trees move at once. When in doubt, take ‘from now on’ and feel the shells before the next dip.
      </p>
      {error !== undefined && <p className="field-error">{error}</p>}
    </fieldset>
  )
}
