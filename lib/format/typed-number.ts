import { z } from 'zod'

/** A number that arrives as a form's text; a decimal comma is as good as a point. An empty field is 'not given'. `field` names it in the complaint. */
export const typedNumber = (field: string) =>
  z.preprocess(
    (value) => {
      if (typeof value !== 'string') return value
      const text = value.trim().replace(',', '.').replace('−', '-')
      return text === '' ? undefined : Number(text)
    },
    z.number(`${field} is a number.`),
  )
