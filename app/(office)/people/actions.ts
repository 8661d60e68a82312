'use server'

import { revalidatePath } from 'next/cache'
import { z } from 'zod'
import { addMember } from '@/lib/commands/add-member'
import { disableMember, enableMember } from '@/lib/commands/disable-member'
import { editMember } from '@/lib/commands/edit-member'
import { renewFirstPassword } from '@/lib/commands/renew-first-password'
import { systemClock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { memberInput } from '@/lib/members/member-input'
import { requireMember } from '@/lib/server/auth'
import { answerForm, type FormState } from '@/lib/server/form-state'
import { fieldErrors } from '@/lib/trees/tree-form-values'

const readMember = (form: FormData) => memberInput.safeParse({ name: form.get('name'), email: form.get('email'), role: form.get('role') })

/** Bound to the form, but sent by the browser like any field. */
function knownId(memberId: string): string {
  const parsed = z.uuid().safeParse(memberId)
  if (!parsed.success) throw new AppError('not_found', 'There is no such member.')
  return parsed.data
}

/** Adds a member and hands their first password back, this one time. */
export async function addMemberAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('people')
  const parsed = readMember(form)
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerForm(async () => {
    const { firstPassword } = await addMember(parsed.data, { member, clock: systemClock })
    revalidatePath('/people')
    return { status: 'done', text: `${parsed.data.name} is a member now.`, secret: firstPassword }
  })
}

/** Name, e-mail and role. */
export async function editMemberAction(memberId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('people')
  const parsed = readMember(form)
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerForm(async () => {
    await editMember(knownId(memberId), parsed.data, { member, clock: systemClock })
    revalidatePath('/', 'layout')
    return { status: 'done', text: 'Saved.' }
  })
}

/** Makes a first password anew and hands it back, this one time. */
export async function renewFirstPasswordAction(memberId: string, _previous: FormState, _form: FormData): Promise<FormState> {
  const member = await requireMember('people')
  return answerForm(async () => {
    const { firstPassword } = await renewFirstPassword(knownId(memberId), { member, clock: systemClock })
    revalidatePath('/people')
    return { status: 'done', text: 'The old password is worth nothing any more.', secret: firstPassword }
  })
}

/** Shuts a member out, at once. */
export async function disableMemberAction(memberId: string, _previous: FormState, _form: FormData): Promise<FormState> {
  const member = await requireMember('people')
  return answerForm(async () => {
    await disableMember(knownId(memberId), { member, clock: systemClock })
    revalidatePath('/people')
    return { status: 'done', text: 'Disabled, and signed out everywhere.' }
  })
}

/** Lets them in again. */
export async function enableMemberAction(memberId: string, _previous: FormState, _form: FormData): Promise<FormState> {
  const member = await requireMember('people')
  return answerForm(async () => {
    await enableMember(knownId(memberId), { member, clock: systemClock })
    revalidatePath('/people')
    return { status: 'done', text: 'Enabled: they sign in with the password they had.' }
  })
}
