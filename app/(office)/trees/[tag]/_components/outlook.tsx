import { Icon } from '@/app/_components/icons'
import { TimePair } from '@/app/_components/time-pair'
import { NOT_CALIBRATED, type Moment } from '@/app/(office)/_components/due-words'
import { pourSentence, type PourVerdict } from '@/lib/burnout/pour-verdict'
import type { QueueTree } from '@/lib/queue/contract'

/** When the whole shell is dried out, and whether its pour holds; nothing where neither is known. */
export function Outlook({ tree, pour, now, timeZone }: { tree: QueueTree; pour: PourVerdict | null } & Moment) {
  if (tree.driedOut === null && pour === null) return null
  const hasPair = tree.driedOut !== null && tree.driedOut.likelyAt !== null && tree.next !== null
  return (
    <p className="outlook">
      {hasPair && tree.driedOut !== null && (
        <>
          Dried out <TimePair pair={tree.driedOut} now={now} timeZone={timeZone} />
          {tree.isPlanUncalibrated && <span> ({NOT_CALIBRATED})</span>}
          {pour === null || tree.pourDate === null ? '.' : ': '}
        </>
      )}
      {tree.next !== null && tree.driedOut?.likelyAt === null && pour === null && 'When the whole shell is dried out is not in sight yet.'}
      {pour !== null && tree.pourDate !== null && (
        <span className={pour === 'will miss' || pour === 'passed' ? 'text-furnace-ink' : pour === 'tight' ? 'text-ochre-ink' : ''}>
          {pour !== 'holds' && pour !== 'not in sight' && <Icon name="warning" />}{' '}
          {hasPair ? pourSentence(pour, tree.pourDate) : asSentence(pourSentence(pour, tree.pourDate))}.
        </span>
      )}
    </p>
  )
}

// After the pair the verdict is the second half of a sentence; alone it begins one.
const asSentence = (words: string) => words.charAt(0).toUpperCase() + words.slice(1)
