import { z } from 'zod'
import { memberEmail, memberName } from '@/lib/members/member-input'
import { passwordProblem } from '@/lib/members/password-rules'

const password = z.string().superRefine((typed, context) => {
  const problem = typed === '' ? 'Type a password.' : passwordProblem(typed)
  if (problem) context.addIssue({ code: 'custom', message: problem })
})

/** The first owner, as they type themselves in. The zone is their browser's guess, to be set right in the first step. */
export const firstOwnerInput = z
  .strictObject({ name: memberName, email: memberEmail, password, setupCode: z.string().trim().max(100), timeZone: z.string().max(100) })
  .superRefine((owner, context) => {
    const problem = passwordProblem(owner.password, owner)
    if (problem) context.addIssue({ code: 'custom', path: ['password'], message: problem })
  })
export type FirstOwnerInput = z.infer<typeof firstOwnerInput>
