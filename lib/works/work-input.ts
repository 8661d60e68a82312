import { z } from 'zod'
import { typedNumber } from '@/lib/format/typed-number'

/** What a supervisor says of a work: its title, and how many there will be. */
export const workInput = z.strictObject({
  title: z.string().trim().min(1, 'Name the work.').max(80, 'A title has at most 80 letters.'),
  editionSize: z.preprocess(
    (value) => (value === '' || value === undefined ? null : value),
    typedNumber('The edition size')
      .pipe(z.int('An edition size is whole.').min(1, 'An edition has at least 1.').max(9999, 'An edition has at most 9999.'))
      .nullable(),
  ),
})
export type WorkInput = z.infer<typeof workInput>

/** A section's name; empty where the work is cast in one. */
export const sectionName = z.string().trim().max(60, 'A section has at most 60 letters.')
