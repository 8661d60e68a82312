import { DatabaseError, TimeoutError } from 'sequelize'
import { describe, expect, it } from 'vitest'
import { AppError } from '@/lib/core/errors'
import { problemOf } from '@/lib/server/problem'

const request = { method: 'POST', url: 'http://kilnward.shop/api/v1/dips?secret=1' }
const sqlite = (code: string) => Object.assign(new Error(`${code}: database or disk is full`), { code, sql: '' })

describe('problemOf', () => {
  it('gives an expected refusal with its own members, which cannot replace the standard ones', async () => {
    const response = problemOf(new AppError('conflict', 'Coat 4 is on.', { trees: [{ tag: 'K-12' }], status: 200 }), request)
    expect(response.status).toBe(409)
    expect(response.headers.get('content-type')).toBe('application/problem+json')
    expect(response.headers.get('cache-control')).toBe('no-store')
    expect(await response.json()).toEqual({
      type: 'urn:kilnward:problem:conflict',
      title: 'conflict',
      status: 409,
      detail: 'Coat 4 is on.',
      trees: [{ tag: 'K-12' }],
    })
  })

  it.each([
    ['a busy database', new TimeoutError(sqlite('SQLITE_BUSY')), 'The records are busy.'],
    ['a full disk', new DatabaseError(sqlite('SQLITE_FULL')), 'The disk of the server is full.'],
    ['a failing disk', new DatabaseError(sqlite('SQLITE_IOERR')), 'The disk of the server does not take or give data.'],
    [
      'a full disk deeper down',
      new Error('rolled back', { cause: new DatabaseError(sqlite('SQLITE_FULL')) }),
      'The disk of the server is full.',
    ],
  ])('says what is wrong with %s and when to try again', async (_name, error, sentence) => {
    const response = problemOf(error, request)
    expect(response.status).toBe(503)
    expect(Number(response.headers.get('retry-after'))).toBeGreaterThan(0)
    expect(await response.json()).toMatchObject({ type: 'urn:kilnward:problem:unavailable', detail: expect.stringContaining(sentence) })
  })

  it.each([new Error('password=hunter2'), 'a string', null, new DatabaseError(sqlite('SQLITE_CORRUPT'))])('hides %s', async (error) => {
    const response = problemOf(error, request)
    expect(response.status).toBe(500)
    expect(await response.json()).toEqual({
      type: 'urn:kilnward:problem:internal',
      title: 'internal',
      status: 500,
      detail: 'The server could not finish this request.',
    })
  })
})
