import { COMMON_PASSWORDS } from '@/lib/members/common-passwords'

const LEAST_PASSWORD_LETTERS = 12
const MOST_PASSWORD_LETTERS = 200

/** Small letters and digits only, so that 'Otter-Gate' and 'ottergate' are the same. */
const folded = (text: string) =>
  text
    .normalize('NFKD')
    .toLowerCase()
    .replaceAll(/[^\p{L}\p{N}]/gu, '')

/** One piece over and over: 'aaaaaaaaaaaa', 'passwordpassword'. */
const REPEATS = /^(.+?)\1+$/su

const BETTER = 'Take a few words that only you would put together.'

/**
 * Why a new password is refused, as a sentence; null when it may stand. Length and being hard to guess count, kinds of characters do not.
 *
 * @param owner whose password it becomes: their name and e-mail are the first that somebody would try.
 * @source NIST SP 800-63B (2025), section 3.1.1.2: a least length, a list of common and expected passwords, no rules of composition.
 *
 * @example passwordProblem('swimmer-at-rest-six') // => null
 * @example passwordProblem('short') // => 'A password has at least 12 characters.'
 */
export function passwordProblem(password: string, owner?: { name: string; email: string }): string | null {
  const letters = Array.from(password.normalize('NFC')).length
  if (letters < LEAST_PASSWORD_LETTERS) return `A password has at least ${LEAST_PASSWORD_LETTERS} characters.`
  if (letters > MOST_PASSWORD_LETTERS) return `A password has at most ${MOST_PASSWORD_LETTERS} characters.`
  const small = password.trim().toLowerCase()
  if (COMMON_PASSWORDS.has(small)) return `This is one of the first passwords that anybody would try. ${BETTER}`
  if (REPEATS.test(small) || REPEATS.test(folded(small))) return `This only repeats itself. ${BETTER}`
  if (owner && isOwnName(password, owner)) return `A password is not a name or an e-mail. ${BETTER}`
  return null
}

/** The name or the e-mail, also with a number before or behind it. */
function isOwnName(password: string, { name, email }: { name: string; email: string }): boolean {
  const bare = folded(password).replaceAll(/^\p{N}+|\p{N}+$/gu, '')
  const [mailbox = ''] = email.split('@')
  return [name, name.split(/\s+/).toReversed().join(' '), email, mailbox].some((own) => {
    const known = folded(own)
    return known !== '' && (folded(password) === known || bare === known.replaceAll(/^\p{N}+|\p{N}+$/gu, ''))
  })
}
