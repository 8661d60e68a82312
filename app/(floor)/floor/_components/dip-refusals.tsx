import { Key } from '@/app/_components/key'
import { Tag } from '@/app/_components/tag'
import type { DipRefusal } from '@/lib/coats/dip-contract'
import { formatMoment } from '@/lib/format/local-time'

export type RefusalAnswer = 'same dip' | 'next one' | 'supervisor'

export type DipRefusalsProps = {
  refusals: DipRefusal[]
  now: number
  timeZone: string
  onAnswer: (refusal: DipRefusal, answer: RefusalAnswer) => void
}

/** Trees that the log did not take, each with its reason and, where two people logged one coat, three ways on. */
export function DipRefusals({ refusals, now, timeZone, onAnswer }: DipRefusalsProps) {
  return (
    <ul className="refusals">
      {refusals.map((refusal) => (
        <li key={refusal.treeId} role="alert">
          <Tag tag={refusal.tag} size="m" />
          <p>{refusalSentence(refusal, now, timeZone)}</p>
          {refusal.reason === 'coat already on' ? (
            <div className="two-keys">
              <Key size={64} onPress={() => onAnswer(refusal, 'same dip')}>
                Same dip, drop mine
              </Key>
              <Key size={64} onPress={() => onAnswer(refusal, 'next one')}>
                It was the next one
              </Key>
              <Key size={64} onPress={() => onAnswer(refusal, 'supervisor')}>
                Leave it to the supervisor
              </Key>
            </div>
          ) : (
            <div className="two-keys">
              <Key size={64} onPress={() => onAnswer(refusal, 'supervisor')}>
                Leave it out
              </Key>
            </div>
          )}
        </li>
      ))}
    </ul>
  )
}

function refusalSentence(refusal: DipRefusal, now: number, timeZone: string): string {
  if (refusal.reason !== 'coat already on') return refusal.detail
  const who = refusal.by ? `, logged by ${refusal.by}` : ''
  const when = refusal.at === null ? '' : ` at ${formatMoment(refusal.at, now, timeZone)}`
  return `Coat ${refusal.coatNumber} is on already${who}${when}. What was yours?`
}
