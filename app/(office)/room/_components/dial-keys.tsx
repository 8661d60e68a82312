'use client'

import { useId } from 'react'
import { Key } from '@/app/_components/key'
import { onDial, stepped, type Dial } from '@/lib/room/coat-what-if'

type DialKeysProps = {
  name: string
  dial: Dial
  value: number
  words: string
  hint?: string
  onChange: (value: number) => void
}

/** A dial that goes by its two keys, by the arrows of a keyboard or by drag. */
export function DialKeys({ name, dial, value, words, hint, onChange }: DialKeysProps) {
  const id = useId()
  return (
    <div className="dial">
      <label htmlFor={id} className="label">
        {name}
      </label>
      <output className="num dial-value" htmlFor={id}>
        {words}
      </output>
      <div className="dial-row">
        <Key aria-label={`${name}: less`} onPress={() => onChange(stepped(value, dial, -1))} icon="minus" deafMs={0}>
          {null}
        </Key>
        <input
          id={id}
          type="range"
          min={dial.min}
          max={dial.max}
          step={dial.step}
          value={onDial(value, dial)}
          aria-valuetext={words}
          onChange={(event) => onChange(onDial(Number(event.target.value), dial))}
        />
        <Key aria-label={`${name}: more`} onPress={() => onChange(stepped(value, dial, 1))} icon="plus" deafMs={0}>
          {null}
        </Key>
      </div>
      {hint && <p className="field-hint">{hint}</p>}
    </div>
  )
}
