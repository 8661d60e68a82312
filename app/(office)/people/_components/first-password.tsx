import type { FormState } from '@/lib/server/form-state'

/** A first password, once: what was made, and what to do with it. */
export function FirstPassword({ state }: { state: FormState }) {
  if (state.status !== 'done' || state.secret === undefined) return null
  return (
    <div className="first-password">
      <p>
        <b>{state.text}</b> Their first password:
      </p>
      <p className="first-password-word">{state.secret}</p>
      <p>
        Write it down or read it out now: it is shown this once and kept nowhere. It is good for a day and for one thing, making a password
        of their own.
      </p>
    </div>
  )
}
