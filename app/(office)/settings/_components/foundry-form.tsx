'use client'

import { useId, useState } from 'react'
import { Field, SelectField } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { Plate } from '@/app/_components/plate'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { saveFoundryAction } from '@/app/(office)/settings/actions'
import '@/app/(office)/settings/settings.css'
import { HIGHEST_ALTITUDE_M, LOWEST_ALTITUDE_M, stationPressurePa } from '@/lib/drying/air'
import { UNIT_SIGNS, type TempUnit } from '@/lib/format/units'
import type { FoundryFormValues } from '@/lib/foundry/foundry-input'

export type FoundryFormProps = {
  values: FoundryFormValues
  /** The unit in which `values` has its temperatures. */
  shown: TempUnit
  /** Names of the time zones to choose from. */
  zones: readonly string[]
  onDone?: () => void
}

/** The foundry's settings. It stands alone on any page. */
export function FoundryForm({ values, shown, zones, onDone }: FoundryFormProps) {
  const form = useKeptForm(saveFoundryAction, onDone)
  const zonesId = useId()
  const [altitude, setAltitude] = useState(values.altitudeM)
  const sign = UNIT_SIGNS[shown]
  return (
    <form {...form.formProps} className="settings-form">
      <input type="hidden" name="shownTempUnit" value={shown} />
      <Plate title="The foundry">
        <div className="form-grid">
          <Field name="name" label="Name" defaultValue={values.name} error={form.errorOf('name')} maxLength={80} autoComplete="off" />
          <div>
            <Field
              name="timeZone"
              label="Time zone"
              list={zonesId}
              defaultValue={values.timeZone}
              error={form.errorOf('timeZone')}
              hint="Begin to type a city. Shift hours, fan timetables and closed days are read in it, those of the past too."
              autoComplete="off"
              spellCheck={false}
            />
            <datalist id={zonesId}>
              {zones.map((zone) => (
                <option key={zone} value={zone}>
                  {zone}
                </option>
              ))}
            </datalist>
          </div>
          <Field
            name="altitudeM"
            label="Altitude"
            unit="m"
            inputMode="decimal"
            defaultValue={values.altitudeM}
            onInput={(event) => setAltitude(event.currentTarget.value)}
            error={form.errorOf('altitudeM')}
            hint={`${pressureWords(altitude)} New readings are worked out with it; stored ones stay as they are. How fast moving air dries follows at once.`}
            autoComplete="off"
          />
        </div>
      </Plate>
      <Plate title="Units" line="for members who have not chosen their own">
        <div className="form-grid-3">
          <SelectField name="tempUnit" label="Temperature" defaultValue={values.tempUnit} error={form.errorOf('tempUnit')}>
            <option value="degC">°C</option>
            <option value="degF">°F</option>
          </SelectField>
          <SelectField name="massUnit" label="Mass" defaultValue={values.massUnit} error={form.errorOf('massUnit')}>
            <option value="kg">kg</option>
            <option value="lb">lb</option>
          </SelectField>
          <SelectField name="lengthUnit" label="Length" defaultValue={values.lengthUnit} error={form.errorOf('lengthUnit')}>
            <option value="mm">mm</option>
            <option value="inch">inch</option>
          </SelectField>
        </div>
      </Plate>
      {/* With another unit the fields begin anew: 20 is not the same in both. */}
      <Plate
        key={shown}
        title="The room that the recipes were made for"
        line="shown beside the air of the room; the drying clock does not use it"
      >
        <div className="form-grid-4">
          <Field
            name="bandLowTempC"
            label="Lowest temperature"
            unit={sign}
            inputMode="decimal"
            defaultValue={values.bandLowTempC}
            error={form.errorOf('bandLowTempC')}
            autoComplete="off"
          />
          <Field
            name="bandHighTempC"
            label="Highest temperature"
            unit={sign}
            inputMode="decimal"
            defaultValue={values.bandHighTempC}
            error={form.errorOf('bandHighTempC')}
            autoComplete="off"
          />
          <Field
            name="bandLowRhPct"
            label="Lowest humidity"
            unit="%"
            inputMode="decimal"
            defaultValue={values.bandLowRhPct}
            error={form.errorOf('bandLowRhPct')}
            autoComplete="off"
          />
          <Field
            name="bandHighRhPct"
            label="Highest humidity"
            unit="%"
            inputMode="decimal"
            defaultValue={values.bandHighRhPct}
            error={form.errorOf('bandHighRhPct')}
            autoComplete="off"
          />
        </div>
      </Plate>
      <div className="form-foot">
        <Key type="submit" tone="go" size={56} isOff={form.isPending}>
          Save the settings
        </Key>
        <FormMessage state={form.state} isLongForm />
      </div>
    </form>
  )
}

/** The air pressure that follows from what is typed; nothing while it is no altitude. */
function pressureWords(typed: string): string {
  const altitudeM = Number(typed.trim().replace(',', '.').replace('−', '-'))
  const isAltitude = typed.trim() !== '' && altitudeM >= LOWEST_ALTITUDE_M && altitudeM <= HIGHEST_ALTITUDE_M
  return isAltitude ? `Standard air pressure there: about ${Math.round(stationPressurePa(altitudeM) / 100)}\u00A0hPa.` : ''
}
