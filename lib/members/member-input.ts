import { z } from 'zod'
import { ROLES } from '@/lib/members/roles'

export const memberName = z.string().trim().min(1, 'Type the name.').max(80, 'A name has at most 80 letters.')

/** Kept in small letters: nobody has two mailboxes that differ only in those. */
export const memberEmail = z
  .string()
  .trim()
  .toLowerCase()
  .max(254, 'An e-mail has at most 254 letters.')
  .pipe(z.email('An e-mail looks like ines@foundry.example.'))

const memberRole = z.enum(ROLES, 'Choose what they may do.')

/** A new member, as the owner types them. */
export const memberInput = z.strictObject({ name: memberName, email: memberEmail, role: memberRole })
export type MemberInput = z.infer<typeof memberInput>
