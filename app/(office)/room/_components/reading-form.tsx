'use client'

import { useRef } from 'react'
import { Field, SelectField } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { newOperationId } from '@/app/(office)/_components/use-operation'
import { typedReadingAction } from '@/app/(office)/room/actions'
import { UNIT_SIGNS, type TempUnit } from '@/lib/format/units'
import type { FormState } from '@/lib/server/form-state'

export type ReadingFormProps = {
  sensors: { id: number; name: string }[]
  chosenId: number
  tempUnit: TempUnit
}

/** A reading that somebody has taken off a hygrometer, now or earlier. */
export function ReadingForm({ sensors, chosenId, tempUnit }: ReadingFormProps) {
  // The id belongs to what is asked: the same words sent twice are one reading.
  const sent = useRef<{ words: string; id: string } | null>(null)
  const form = useKeptForm(async (previous: FormState, data: FormData) => {
    const words = JSON.stringify([...data.entries()].filter(([name]) => name !== 'operationId'))
    if (sent.current?.words !== words) sent.current = { words, id: newOperationId() }
    data.set('operationId', sent.current.id)
    const answer = await typedReadingAction(previous, data)
    if (answer.status === 'done') sent.current = null
    return answer
  })
  return (
    <form {...form.formProps} className="reading-form">
      <SelectField name="sensorId" label="What was read" defaultValue={chosenId} error={form.errorOf('sensorId')}>
        {sensors.map((sensor) => (
          <option key={sensor.id} value={sensor.id}>
            {sensor.name}
          </option>
        ))}
      </SelectField>
      <Field
        name="airTempC"
        label="Temperature"
        unit={UNIT_SIGNS[tempUnit]}
        inputMode="decimal"
        autoComplete="off"
        maxLength={8}
        error={form.errorOf('airTempC')}
      />
      <Field
        name="relHumidityPct"
        label="Humidity"
        unit="% RH"
        inputMode="decimal"
        autoComplete="off"
        maxLength={6}
        error={form.errorOf('relHumidityPct')}
      />
      <Field name="measuredAt" label="When" type="datetime-local" hint="Empty is now." error={form.errorOf('measuredAt')} />
      <Key type="submit" tone="ink" isOff={form.isPending}>
        Keep the reading
      </Key>
      <FormMessage state={form.state} />
    </form>
  )
}
