'use client'

import { Field } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { saveOffsetAction } from '@/app/(office)/settings/sensors/actions'
import type { TempUnit } from '@/lib/format/units'

/** What is to be added to a sensor's readings, from a moment on. */
export function OffsetForm({ sensorId, tempUnit }: { sensorId: number; tempUnit: TempUnit }) {
  const form = useKeptForm(saveOffsetAction.bind(null, sensorId))
  return (
    <form {...form.formProps} className="settings-form" aria-label="Enter an offset">
      <div className="form-grid">
        <Field
          name="airTempOffsetK"
          label="Add to the temperature"
          unit={tempUnit === 'degF' ? '°F' : 'K'}
          defaultValue="0"
          inputMode="text"
          autoComplete="off"
          error={form.errorOf('airTempOffsetK')}
          hint="Reference less sensor. It shows 21.4, the reference 21.0: −0.4."
        />
        <Field
          name="relHumidityOffsetPct"
          label="Add to the humidity"
          unit="points"
          defaultValue="0"
          inputMode="text"
          autoComplete="off"
          error={form.errorOf('relHumidityOffsetPct')}
          hint="Reference less sensor. It shows 72 %, the salt jar is 75 %: 3."
        />
        <Field
          name="since"
          label="Counts from"
          type="datetime-local"
          error={form.errorOf('since')}
          hint="Empty is now. A time in the past corrects the readings since then, and the drying times with them."
        />
        <Field
          name="note"
          label="Note"
          maxLength={200}
          autoComplete="off"
          error={form.errorOf('note')}
          hint="With what it was compared: salt jar, 2 h."
        />
      </div>
      <div className="form-foot">
        <Key type="submit" tone="go" isOff={form.isPending}>
          Enter the offset
        </Key>
        <FormMessage state={form.state} />
      </div>
    </form>
  )
}
