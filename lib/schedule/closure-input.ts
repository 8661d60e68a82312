import { z } from 'zod'
import { formText } from '@/lib/format/form-text'

const DAY_MS = 86_400_000
/** A year's holiday is a slip of the finger. */
const LONGEST_DAYS = 366

const lengthOf = ({ firstDay, lastDay }: { firstDay: string; lastDay: string }) =>
  (Date.parse(`${lastDay}T00:00:00Z`) - Date.parse(`${firstDay}T00:00:00Z`)) / DAY_MS + 1

/** Days on which nobody dips, both ends included. */
export const closureInput = z
  .strictObject({
    name: z.string().trim().min(1, 'Name it, such as Christmas.').max(60, 'A name has at most 60 letters.'),
    firstDay: z.iso.date('The first closed day, such as 2026-12-24.'),
    lastDay: z.iso.date('The last closed day, such as 2027-01-03.'),
  })
  .refine((closure) => closure.firstDay <= closure.lastDay, { path: ['lastDay'], message: 'The last day is not before the first.' })
  .refine((closure) => lengthOf(closure) <= LONGEST_DAYS, { path: ['lastDay'], message: 'A closure is at most a year long.' })
export type ClosureInput = z.infer<typeof closureInput>

/** Form fields of a closure. One day alone may leave the last day empty. */
export function readClosureForm(form: FormData) {
  const firstDay = formText(form, 'firstDay')
  return { name: formText(form, 'name'), firstDay, lastDay: formText(form, 'lastDay') || firstDay }
}
