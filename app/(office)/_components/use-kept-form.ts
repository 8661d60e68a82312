'use client'

import { unstable_rethrow } from 'next/navigation'
import { startTransition, useActionState, useEffect, useRef, type FormEvent, type RefObject } from 'react'
import type { FormState } from '@/lib/server/form-state'

export type KeptForm = {
  state: FormState
  isPending: boolean
  errorOf: (field: string) => string | undefined
  formProps: {
    ref: RefObject<HTMLFormElement | null>
    /** Sent before the page has woken, a form without it would put what was typed, passwords too, into the address. */
    method: 'post'
    onSubmit: (event: FormEvent<HTMLFormElement>) => void
    noValidate: true
  }
  /** For keys that are not submit keys, such as one that is held. */
  submit: () => void
}

const NO_ANSWER = 'Not saved: the server did not answer, or you were signed out. What you typed is still here; try again.'

/**
 * A form on a server action that loses nothing: fields are not reset, whatever the answer; a lost connection is a sentence
 * like any other; after a complaint the first wrong field gets the focus.
 */
export function useKeptForm(action: (previous: FormState, form: FormData) => Promise<FormState>, onDone?: () => void): KeptForm {
  const ref = useRef<HTMLFormElement>(null)
  const [state, dispatch, isPending] = useActionState<FormState, FormData>(
    async (previous, form) => {
      try {
        return await action(previous, form)
      } catch (error) {
        unstable_rethrow(error)
        return { status: 'refused', text: NO_ANSWER }
      }
    },
    { status: 'idle' },
  )
  const done = useRef(onDone)
  useEffect(() => {
    done.current = onDone
  })
  useEffect(() => {
    if (state.status === 'invalid') ref.current?.querySelector<HTMLElement>('[aria-invalid="true"]')?.focus()
    if (state.status === 'done') done.current?.()
  }, [state])
  return {
    state,
    isPending,
    // A new try is under way: what was wrong with the last one is not said of it.
    errorOf: (field) => (state.status === 'invalid' && !isPending ? state.fields[field] : undefined),
    formProps: {
      ref,
      method: 'post',
      noValidate: true,
      onSubmit: (event) => {
        event.preventDefault()
        if (isPending) return
        const form = new FormData(event.currentTarget)
        startTransition(() => dispatch(form))
      },
    },
    submit: () => ref.current?.requestSubmit(),
  }
}
