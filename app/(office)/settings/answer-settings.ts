import { revalidatePath } from 'next/cache'
import type { z } from 'zod'
import { answerForm, type FormState } from '@/lib/server/form-state'
import { fieldErrors } from '@/lib/trees/tree-form-values'

/** Runs one command of the settings and reads every page anew: a place or a closed day shows on many. `run` gives the words for what was done. */
export function answerSettings(run: () => Promise<string>): Promise<FormState> {
  return answerForm(async () => {
    const text = await run()
    revalidatePath('/', 'layout')
    return { status: 'done', text }
  })
}

/** The same for a form whose fields were checked: what was not accepted goes back beside its field. */
export async function answerFields<Input>(parsed: z.ZodSafeParseResult<Input>, run: (input: Input) => Promise<string>): Promise<FormState> {
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerSettings(() => run(parsed.data))
}
