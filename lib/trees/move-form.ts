import { millisecondsInMinute } from 'date-fns/constants'
import { z } from 'zod'
import { formText } from '@/lib/format/form-text'
import { localInstant } from '@/lib/room/reading-form'

/** How long ago a move can be told by one choice, minutes; 0 is just now. */
export const MOVED_MINUTES_AGO = [0, 10, 20, 40] as const

/**
 * The form of a move: where the tree hangs, and since when, as one of the choices or by day and time of the foundry's clock, which goes
 * before. `movedAt` in epoch ms; none is now.
 */
export const moveForm = (now: number, timeZone: string) =>
  z
    .object({
      placeId: z.uuid('Choose where it hangs now.'),
      minutesAgo: z.coerce.number().pipe(z.literal(MOVED_MINUTES_AGO, 'Choose since when.')),
      movedAt: z.string().transform((text, context) => {
        if (text.trim() === '') return null
        const at = localInstant(text.trim(), timeZone)
        if (at === null) context.addIssue('Give day and time, or leave it empty.')
        return at
      }),
    })
    .transform(({ placeId, minutesAgo, movedAt }) => ({
      placeId,
      movedAt: movedAt ?? (minutesAgo === 0 ? undefined : now - minutesAgo * millisecondsInMinute),
    }))

/** Form fields of a move. */
export const readMoveForm = (form: FormData) => ({
  placeId: formText(form, 'placeId'),
  minutesAgo: formText(form, 'minutesAgo'),
  movedAt: formText(form, 'movedAt'),
})
