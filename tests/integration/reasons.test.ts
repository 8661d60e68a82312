import { expect, it } from 'vitest'
import { AppError, reasonOf, traceOf } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'

const NOW = Date.parse('2026-12-01T10:00:00Z')

it('a log names the constraint that was broken, and no value of the row', async () => {
  const { Work } = await import('@/models')
  const add = (title: string, createdAt: number) => Work.create({ id: newId(), title, createdAt }).catch((error: unknown) => error)
  await add('Heron', NOW)
  const doubled = await add('Heron', NOW)
  expect(reasonOf(doubled)).toBe(
    'SequelizeUniqueConstraintError: Validation error (SQLITE_CONSTRAINT: UNIQUE constraint failed: works.title)',
  )
  expect(traceOf(doubled)).toMatch(/works\.title\)\n\s+at /)
  expect(traceOf(doubled)).not.toContain('Heron')
  // Which no person could guess from 'unique'.
  expect(reasonOf(await add('Otter', NOW + 0.5))).toMatch(/cannot store REAL value in INTEGER column works\.created_at/)
})

it('other troubles keep their own words', () => {
  expect(reasonOf(new AppError('conflict', 'The demo data is here already.'))).toBe('The demo data is here already.')
  expect(reasonOf(new TypeError('no such thing'))).toBe('TypeError: no such thing')
  expect(reasonOf('a word')).toBe('a word')
})
