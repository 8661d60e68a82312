import { z } from 'zod'
import { AppError } from '@/lib/core/errors'
import type { FieldErrors } from '@/lib/trees/tree-form-values'

/** Answer of a server action to a form. What was typed stays in the browser, so it does not travel back. */
export type FormState =
  | { status: 'idle' }
  /** `text` says what was done, for the eyes and for a reader; `secret` is shown this one time and kept nowhere. */
  | { status: 'done'; text: string; secret?: string }
  | { status: 'invalid'; fields: FieldErrors }
  | { status: 'refused'; text: string }

/** A refusal that names the fields it is about, as the API's problem documents do. */
const refusedFields = z.array(z.object({ path: z.string(), message: z.string() })).min(1)

/**
 * Runs what a form asks for. An expected refusal becomes a sentence: beside the fields it names, else under the form.
 * Anything else is a fault and goes on to the error page.
 */
export async function answerForm(act: () => Promise<FormState>): Promise<FormState> {
  try {
    return await act()
  } catch (error) {
    if (!(error instanceof AppError)) throw error
    const named = refusedFields.safeParse(error.extra['fields'])
    if (!named.success) return { status: 'refused', text: error.message }
    return { status: 'invalid', fields: Object.fromEntries(named.data.map(({ path, message }) => [path, message])) }
  }
}
