import { describe, expect, it } from 'vitest'
import { hashPassword, isPasswordRight, PASSWORD_COST } from '@/lib/server/password'

const CHEAP = 16

describe('a password', () => {
  it('fits its own hash and no other', async () => {
    const hash = await hashPassword('wax and bronze', CHEAP)
    expect(hash).toMatch(/^scrypt\$16\$8\$1\$[\w-]{22}\$[\w-]{43}$/)
    expect(await isPasswordRight('wax and bronze', hash)).toBe(true)
    expect(await isPasswordRight('wax and bronzE', hash)).toBe(false)
  })

  it('has another salt each time', async () => {
    expect(await hashPassword('same', CHEAP)).not.toBe(await hashPassword('same', CHEAP))
  })

  it('is the same in both ways of writing an umlaut', async () => {
    expect(await isPasswordRight('Gu\u0308ss', await hashPassword('G\u00fcss', CHEAP))).toBe(true)
  })

  it('works at the full cost', async () => {
    const hash = await hashPassword('full')
    expect(hash).toContain(`scrypt$${PASSWORD_COST}$8$1$`)
    expect(await isPasswordRight('full', hash)).toBe(true)
  })

  it.each([null, '', 'scrypt$', 'plain'])('never fits the hash %s, and says so without an error', async (hash) => {
    expect(await isPasswordRight('x', hash, CHEAP)).toBe(false)
  })
})
