import { describe, expect, it } from 'vitest'
import { AppError } from '@/lib/core/errors'
import { answerForm } from '@/lib/server/form-state'

const refuse = (error: unknown) => answerForm(() => Promise.reject(error))

describe('answerForm', () => {
  it('hands on what was done', async () => {
    expect(await answerForm(() => Promise.resolve({ status: 'done', text: 'Held.' }))).toEqual({ status: 'done', text: 'Held.' })
  })

  it('puts a refusal beside the fields it names', async () => {
    const error = new AppError('conflict', 'T-1 was used before.', { fields: [{ path: 'tag', message: 'T-1 was used before.' }] })
    expect(await refuse(error)).toEqual({ status: 'invalid', fields: { tag: 'T-1 was used before.' } })
  })

  it('puts any other refusal under the form', async () => {
    expect(await refuse(new AppError('conflict', 'It is held already.'))).toEqual({ status: 'refused', text: 'It is held already.' })
    expect(await refuse(new AppError('conflict', 'Odd.', { fields: [] }))).toEqual({ status: 'refused', text: 'Odd.' })
  })

  it('lets a fault through', async () => {
    await expect(refuse(new Error('disk'))).rejects.toThrow('disk')
  })
})
