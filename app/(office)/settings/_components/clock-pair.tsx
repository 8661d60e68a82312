import { FieldError } from '@/app/_components/field'

export type ClockPairProps = {
  /** What it is about, for a reader: 'Monday, fans on'. */
  about: string
  from: { name: string; value: string; error: string | undefined }
  to: { name: string; value: string; error: string | undefined }
  onChange: (pair: { from: string; to: string }) => void
}

/** 'From … to …' as typed wall-clock times: always 24 h, whatever the browser's own language. */
export function ClockPair({ about, from, to, onChange }: ClockPairProps) {
  const input = (end: typeof from, words: string, change: (value: string) => void) => (
    <input
      className="input clock-input num"
      name={end.name}
      value={end.value}
      aria-label={`${about} ${words}`}
      aria-invalid={end.error === undefined ? undefined : true}
      aria-describedby={end.error === undefined ? undefined : `${end.name}-error`}
      placeholder={words === 'from' ? '07:00' : '16:30'}
      maxLength={5}
      autoComplete="off"
      onChange={(event) => change(event.currentTarget.value)}
    />
  )
  return (
    <div className="clock-pair">
      <span className="clock-pair-fields">
        {input(from, 'from', (value) => onChange({ from: value, to: to.value }))}
        <span aria-hidden="true">to</span>
        {input(to, 'to', (value) => onChange({ from: from.value, to: value }))}
      </span>
      {from.error !== undefined && <FieldError id={`${from.name}-error`} error={from.error} />}
      {to.error !== undefined && <FieldError id={`${to.name}-error`} error={to.error} />}
    </div>
  )
}
