'use client'

import { useState } from 'react'
import { Field, SelectField } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { addTopicAction, changeTopicAction } from '@/app/(office)/settings/mqtt/actions'
import type { TopicFormValues } from '@/lib/mqtt/topic-input'

export type TopicFormProps = {
  sensors: readonly { id: number; name: string }[]
  /** A known topic; a new one without. */
  topic?: { id: string; values: TopicFormValues }
  onDone?: () => void
}

const NEW: TopicFormValues = {
  filter: '',
  sensorId: '',
  tempPath: '',
  rhPath: '',
  pressurePath: '',
  timePath: '',
  batteryPath: '',
  tempUnit: 'degC',
  timeForm: 'arrival',
}
const PATH = { autoComplete: 'off', autoCapitalize: 'none', spellCheck: false, maxLength: 120 } as const

/** The form of a topic: what it feeds, and where in its messages the figures stand. */
export function TopicForm({ sensors, topic, onDone }: TopicFormProps) {
  const values = topic?.values ?? NEW
  const form = useKeptForm(topic ? changeTopicAction.bind(null, topic.id) : addTopicAction, onDone)
  const [timeForm, setTimeForm] = useState(values.timeForm)
  const isKnown = sensors.some(({ id }) => String(id) === values.sensorId)
  return (
    <form {...form.formProps} className="settings-form">
      <div className="form-grid">
        <Field
          name="filter"
          label="Topic"
          defaultValue={values.filter}
          placeholder="shop/loft/air"
          error={form.errorOf('filter')}
          hint="With + for one level or # for all below, every topic that fits feeds this sensor."
          autoComplete="off"
          autoCapitalize="none"
          spellCheck={false}
          maxLength={250}
        />
        <SelectField
          name="sensorId"
          label="Feeds the sensor"
          defaultValue={isKnown ? values.sensorId : ''}
          error={form.errorOf('sensorId')}
        >
          <option value="" disabled>
            Choose a logger
          </option>
          {sensors.map(({ id, name }) => (
            <option key={id} value={id}>
              {name}
            </option>
          ))}
        </SelectField>
      </div>
      <p className="field-hint">
        Paths are written like <code>data.temp</code> or <code>$.probes[0].temp</code>; <code>$</code> is a message that is a number alone.
        Where one topic tells the temperature and another the humidity, add both: the two make a reading when they come within 2 min.
      </p>
      <div className="form-grid-3">
        <Field {...PATH} name="tempPath" label="Path to the temperature" defaultValue={values.tempPath} error={form.errorOf('tempPath')} />
        <SelectField name="tempUnit" label="Its unit" defaultValue={values.tempUnit} error={form.errorOf('tempUnit')}>
          <option value="degC">°C</option>
          <option value="degF">°F</option>
        </SelectField>
        <Field {...PATH} name="rhPath" label="Path to the humidity (%)" defaultValue={values.rhPath} error={form.errorOf('rhPath')} />
        <SelectField
          name="timeForm"
          label="How it tells the time"
          defaultValue={values.timeForm}
          onChange={(event) => setTimeForm(event.currentTarget.value)}
          error={form.errorOf('timeForm')}
          hint={
            timeForm === 'arrival'
              ? 'The moment of arrival counts. What waited at the broker is then passed over: nobody knows how old it is.'
              : undefined
          }
        >
          <option value="arrival">It does not</option>
          <option value="epoch s">Seconds since 1970</option>
          <option value="epoch ms">Milliseconds since 1970</option>
          <option value="iso">ISO 8601 with its zone</option>
        </SelectField>
        {timeForm !== 'arrival' && (
          <Field {...PATH} name="timePath" label="Path to the time" defaultValue={values.timePath} error={form.errorOf('timePath')} />
        )}
      </div>
      <div className="form-grid-3">
        <Field
          {...PATH}
          name="pressurePath"
          label="Path to the air pressure"
          defaultValue={values.pressurePath}
          error={form.errorOf('pressurePath')}
          hint="If it has one; Pa, hPa or kPa."
        />
        <Field
          {...PATH}
          name="batteryPath"
          label="Path to the battery (%)"
          defaultValue={values.batteryPath}
          error={form.errorOf('batteryPath')}
          hint="If it tells."
        />
      </div>
      <div className="form-foot">
        <Key type="submit" tone="go" isOff={form.isPending}>
          {topic ? 'Save the topic' : 'Add the topic'}
        </Key>
        <FormMessage state={form.state} isLongForm />
      </div>
    </form>
  )
}
