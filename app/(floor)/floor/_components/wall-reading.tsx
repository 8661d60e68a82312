import { useEffect, useId, useRef } from 'react'
import { Icon } from '@/app/_components/icons'
import { useUnits } from '@/app/_components/units-context'
import type { DialErrors } from '@/lib/floor/dip-draft'
import { UNIT_SIGNS } from '@/lib/format/units'

export type WallReadingProps = {
  temp: string
  humidity: string
  errors: DialErrors
  words: string
  onTemp: (text: string) => void
  onHumidity: (text: string) => void
}

/** The two dials of a wall hygrometer, with the sentence about a wrong one beside them. */
export function WallReading({ temp, humidity, errors, words, onTemp, onHumidity }: WallReadingProps) {
  const id = useId()
  const { temp: unit } = useUnits()
  const wrong = [errors.airTempC, errors.relHumidityPct].filter((error) => error !== undefined)
  const errorId = `${id}-error`
  const frame = useRef<HTMLFieldSetElement>(null)
  useEffect(() => {
    // Focus brings it into view too, where the sheet is fuller than the screen.
    if (errors.airTempC ?? errors.relHumidityPct) frame.current?.querySelector<HTMLElement>('[aria-invalid]')?.focus()
  }, [errors])
  return (
    <fieldset ref={frame} className="wall" aria-label="Wall hygrometer">
      <span className="choice-label">Wall hygro&shy;meter</span>
      <Dial
        id={`${id}-t`}
        label="Temperature"
        unit={UNIT_SIGNS[unit]}
        value={temp}
        isWrong={errors.airTempC !== undefined}
        errorId={errorId}
        onChange={onTemp}
      />
      <Dial
        id={`${id}-h`}
        label="Humidity"
        unit="% RH"
        value={humidity}
        isWrong={errors.relHumidityPct !== undefined}
        errorId={errorId}
        onChange={onHumidity}
      />
      <div className="wall-words" id={errorId} aria-live="polite">
        {wrong.length === 0
          ? words
          : wrong.map((error) => (
              <p key={error} className="wall-error">
                <Icon name="warning" />
                <span>{error}</span>
              </p>
            ))}
      </div>
    </fieldset>
  )
}

type DialProps = {
  id: string
  label: string
  unit: string
  value: string
  isWrong: boolean
  errorId: string
  onChange: (text: string) => void
}

function Dial({ id, label, unit, value, isWrong, errorId, onChange }: DialProps) {
  return (
    <label className="wall-dial" htmlFor={id} data-wrong={isWrong}>
      <span>{label}</span>
      <span>
        <input
          id={id}
          inputMode="decimal"
          autoComplete="off"
          value={value}
          aria-invalid={isWrong || undefined}
          aria-describedby={errorId}
          onChange={(event) => onChange(event.target.value)}
        />
        <small className="num">{unit}</small>
      </span>
    </label>
  )
}
