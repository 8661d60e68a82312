import { describe, expect, it } from 'vitest'
import { moveForm, readMoveForm } from '@/lib/trees/move-form'
import { fieldErrors } from '@/lib/trees/tree-form-values'

const NOW = Date.parse('2026-10-13T15:02:00Z')
const PLACE_ID = '018f7d1e-7c00-7000-8000-000000000002'
const parse = (fields: Record<string, string>) => {
  const form = new FormData()
  for (const [name, value] of Object.entries({ placeId: PLACE_ID, minutesAgo: '0', ...fields })) form.set(name, value)
  return moveForm(NOW, 'Europe/London').safeParse(readMoveForm(form))
}

describe('the form of a move', () => {
  it.each<{ name: string; fields: Record<string, string>; movedAt: number | undefined }>([
    { name: 'just now', fields: {}, movedAt: undefined },
    { name: '20 min ago', fields: { minutesAgo: '20' }, movedAt: NOW - 20 * 60_000 },
    { name: 'a time by the clock of the foundry', fields: { movedAt: '2026-10-13T14:10' }, movedAt: Date.parse('2026-10-13T13:10:00Z') },
    {
      name: 'that time before the choice',
      fields: { minutesAgo: '40', movedAt: '2026-10-13T14:10' },
      movedAt: Date.parse('2026-10-13T13:10:00Z'),
    },
  ])('knows $name', ({ fields, movedAt }) => {
    expect(parse(fields).data).toEqual({ placeId: PLACE_ID, movedAt })
  })

  it.each<{ fields: Record<string, string>; errors: Record<string, string> }>([
    { fields: { placeId: '' }, errors: { placeId: 'Choose where it hangs now.' } },
    { fields: { minutesAgo: '15' }, errors: { minutesAgo: 'Choose since when.' } },
    { fields: { movedAt: 'ten past two' }, errors: { movedAt: 'Give day and time, or leave it empty.' } },
  ])('complains beside its field: $errors', ({ fields, errors }) => {
    const parsed = parse(fields)
    expect(parsed.success ? {} : fieldErrors(parsed.error)).toEqual(errors)
  })
})
