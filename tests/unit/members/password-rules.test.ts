import { describe, expect, it } from 'vitest'
import { COMMON_PASSWORDS } from '@/lib/members/common-passwords'
import { passwordProblem } from '@/lib/members/password-rules'

const INES = { name: 'Ines Calloway', email: 'ines.calloway@foundry.example' }
const COMMON = /first passwords that anybody would try/
const OWN = /not a name or an e-mail/

describe('a new password', () => {
  it('has 12 to 200 characters, whatever they are', () => {
    expect(passwordProblem('a'.repeat(11))).toBe('A password has at least 12 characters.')
    expect(passwordProblem('otter gate 2')).toBeNull()
    expect(passwordProblem(`otter gate${'x y z'.repeat(38)}`)).toBeNull()
    expect(passwordProblem(`otter gate${'x y z'.repeat(38)}!`)).toBe('A password has at most 200 characters.')
  })

  it('counts what a person sees as one character as one', () => {
    // Eleven letters; the last one written with a mark of its own is still one.
    expect(passwordProblem('Fischgra\u0308ten')).toBe('A password has at least 12 characters.')
    expect(passwordProblem('🦦 und 🦆 am Wehr')).toBeNull()
  })

  it('is none of the commonest, in any case', () => {
    expect(passwordProblem('1qaz2wsx3edc')).toMatch(COMMON)
    expect(passwordProblem('Password1234')).toMatch(COMMON)
    expect(passwordProblem('QWERTY123456')).toMatch(COMMON)
    for (const common of COMMON_PASSWORDS) expect(passwordProblem(common), common).toMatch(COMMON)
  })

  it('does not only repeat itself', () => {
    for (const weak of ['aaaaaaaaaaaa', 'abcabcabcabc', 'PasswordPassword', '------------', 'otter gate, Otter Gate']) {
      expect(passwordProblem(weak)).toMatch(/only repeats itself/)
    }
    expect(passwordProblem('gull gull otter')).toBeNull()
  })

  it('is not the name or the e-mail, however it is written', () => {
    const own = [
      'ines calloway',
      'InesCalloway',
      'Calloway, Ines',
      'ines.calloway@foundry.example',
      'ines-calloway-1987',
      '2026inescalloway',
    ]
    for (const name of own) expect(passwordProblem(name, INES), name).toMatch(OWN)
    expect(passwordProblem('ines calloway likes otters', INES)).toBeNull()
    expect(passwordProblem('ines calloway')).toBeNull()
  })
})

describe('the list of the commonest', () => {
  it('holds only what the rule of length lets through, in small letters', () => {
    expect(COMMON_PASSWORDS.size).toBeGreaterThan(250)
    for (const common of COMMON_PASSWORDS) {
      expect(common.length, common).toBeGreaterThanOrEqual(12)
      expect(common).toBe(common.toLowerCase())
    }
  })
})
