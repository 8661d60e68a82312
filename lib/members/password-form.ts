import { z } from 'zod'

/** Longer than any password that the rules let through; what is wrong with it they say themselves. */
const MOST_LETTERS = 1000

/** The form of a change of password. */
export const passwordForm = z.strictObject({
  currentPassword: z
    .string()
    .min(1, 'Type the password that you have now.')
    .max(MOST_LETTERS, 'This is not the password that you have now.'),
  newPassword: z.string().min(1, 'Type a new password.').max(MOST_LETTERS, 'This is too long for a password.'),
})
