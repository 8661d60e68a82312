import { z } from 'zod'
import { formText } from '@/lib/format/form-text'
import { endClock, startClock } from '@/lib/schedule/clock-text'
import type { ShiftHours } from '@/lib/schedule/shifts'
import { WEEKDAYS } from '@/lib/schedule/week-words'

const closedDay = z.strictObject({ isOpen: z.literal(false), opens: z.string(), closes: z.string() })
const openDay = z
  .strictObject({ isOpen: z.literal(true), opens: startClock, closes: endClock })
  .refine(({ opens, closes }) => opens < closes, { path: ['closes'], message: 'A shift closes after it opens.' })

/** The hours of a week as typed, Monday first; the shift hours of the open days. At least one day is open. */
export const hoursInput = z
  .strictObject({ days: z.array(z.discriminatedUnion('isOpen', [openDay, closedDay])).length(WEEKDAYS.length) })
  .refine(({ days }) => days.some((day) => day.isOpen), { path: ['days'], message: 'At least one day is open.' })
  .transform(({ days }): ShiftHours[] =>
    days.flatMap((day, index) => (day.isOpen ? [{ weekday: index + 1, opensMinute: day.opens, closesMinute: day.closes }] : [])),
  )

/** Form fields of a week: `days.0.isOpen`, `days.0.opens`, `days.0.closes` for Monday, and so on. */
export function readHoursForm(form: FormData) {
  return {
    days: WEEKDAYS.map((_, index) => ({
      isOpen: form.get(`days.${index}.isOpen`) === 'on',
      opens: formText(form, `days.${index}.opens`),
      closes: formText(form, `days.${index}.closes`),
    })),
  }
}
