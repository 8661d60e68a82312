import { useId, useState } from 'react'
import { Key } from '@/app/_components/key'

/** The key before the line was pressed to type in it. Stable, so that the focus is taken once and not at every redraw. */
export const focusInput = (input: HTMLInputElement | null): void => input?.focus()

export type ReasonChoiceProps = { label: string; presets: string[]; reason: string; onReason: (reason: string) => void }

/** Why: large keys for the usual reasons, a line for any other. */
export function ReasonChoice({ label, presets, reason, onReason }: ReasonChoiceProps) {
  const id = useId()
  const [isOther, setIsOther] = useState(reason !== '' && !presets.includes(reason))
  return (
    <fieldset className="reason" aria-labelledby={id}>
      <p className="choice-label" id={id}>
        {label} <small>The supervisor reads it.</small>
      </p>
      <div>
        {presets.map((preset) => (
          <Key
            key={preset}
            size={64}
            isChosen={!isOther && reason === preset}
            onPress={() => {
              setIsOther(false)
              onReason(preset)
            }}
          >
            {preset}
          </Key>
        ))}
        <Key
          size={64}
          isChosen={isOther}
          onPress={() => {
            setIsOther(true)
            if (presets.includes(reason)) onReason('')
          }}
        >
          Other
        </Key>
      </div>
      {isOther && (
        <input
          className="input text-24"
          aria-label="Other reason"
          maxLength={300}
          placeholder="In a few words"
          ref={focusInput}
          value={reason}
          onChange={(event) => onReason(event.target.value)}
        />
      )}
    </fieldset>
  )
}
