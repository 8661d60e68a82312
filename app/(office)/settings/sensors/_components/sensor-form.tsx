'use client'

import { Field, SelectField } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { addSensorAction, renameSensorAction } from '@/app/(office)/settings/sensors/actions'
import '@/app/(office)/settings/settings.css'
import { SENSOR_KIND_WORDS, SENSOR_KINDS } from '@/lib/room/sensor-input'

export type SensorFormProps = {
  /** A known sensor, whose name alone can change; a new one without. */
  sensor?: { id: number; name: string }
  onDone?: () => void
}

/** The form of a sensor. It stands alone on any page. */
export function SensorForm({ sensor, onDone }: SensorFormProps) {
  const form = useKeptForm(sensor ? renameSensorAction.bind(null, sensor.id) : addSensorAction, onDone)
  return (
    <form {...form.formProps} className="settings-form">
      <div className="form-grid">
        <Field
          name="name"
          label="Name"
          defaultValue={sensor?.name ?? ''}
          error={form.errorOf('name')}
          hint="Where it hangs: Shell room, north wall."
          maxLength={60}
          autoComplete="off"
        />
        {!sensor && (
          <SelectField
            name="kind"
            label="How its readings come"
            defaultValue=""
            error={form.errorOf('kind')}
            hint="A logger gets a token, with which it sends. A wall hygrometer is read at each dip; what it says holds for 12 h at most."
          >
            <option value="" disabled>
              Choose how they come
            </option>
            {SENSOR_KINDS.map((kind) => (
              <option key={kind} value={kind}>
                {SENSOR_KIND_WORDS[kind]}
              </option>
            ))}
          </SelectField>
        )}
      </div>
      <div className="form-foot">
        <Key type="submit" tone="go" isOff={form.isPending}>
          {sensor ? 'Save the name' : 'Add the sensor'}
        </Key>
        <FormMessage state={form.state} />
      </div>
    </form>
  )
}
