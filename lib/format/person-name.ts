/** A name cut where a narrow place keeps the first part only: 'Maud Penhallow' as 'Maud' and 'Penhallow'. */
export function splitName(name: string): { first: string; rest: string } {
  const [first = '', ...rest] = name.trim().split(/\s+/)
  return { first, rest: rest.join(' ') }
}
