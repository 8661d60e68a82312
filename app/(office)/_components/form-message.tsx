import { Icon } from '@/app/_components/icons'
import type { FormState } from '@/lib/server/form-state'

/** What the server said to the form as a whole. Complaints about one field stand beside it; a long form says that there are some. */
export function FormMessage({ state, isLongForm = false }: { state: FormState; isLongForm?: boolean }) {
  return (
    <div aria-live="polite">
      {state.status === 'refused' && (
        <p className="field-error">
          <Icon name="warning" />
          <span>{state.text}</span>
        </p>
      )}
      {state.status === 'invalid' && isLongForm && (
        <p className="field-error">
          <Icon name="warning" />
          <span>Not saved. See the marked {Object.keys(state.fields).length === 1 ? 'field' : 'fields'}.</span>
        </p>
      )}
      {state.status === 'done' && (
        <p className="form-done">
          <Icon name="check" />
          <span>{state.text}</span>
        </p>
      )}
    </div>
  )
}
