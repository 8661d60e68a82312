'use server'

import { redirect } from 'next/navigation'
import { changePassword } from '@/lib/commands/change-password'
import { systemClock } from '@/lib/core/clock'
import { passwordForm } from '@/lib/members/password-form'
import { moveToSession, requireMember } from '@/lib/server/auth'
import { answerForm, type FormState } from '@/lib/server/form-state'
import { fieldErrors } from '@/lib/trees/tree-form-values'

/** Changes one's own password: from a first one on to the floor, else back to one's own page. */
export async function changePasswordAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('own password')
  const parsed = passwordForm.safeParse({ currentPassword: form.get('currentPassword'), newPassword: form.get('newPassword') })
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerForm(async () => {
    const { sessionId } = await changePassword(parsed.data, { member, clock: systemClock })
    await moveToSession(member.id, sessionId)
    redirect(member.mustChangePassword ? '/floor' : '/me?password=changed')
  })
}
