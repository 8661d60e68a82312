import { Icon } from '@/app/_components/icons'
import { TimePair } from '@/app/_components/time-pair'
import { NOT_CALIBRATED, type Moment } from '@/app/(office)/_components/due-words'
import { pourSentence, type PourVerdict } from '@/lib/burnout/pour-verdict'
import type { QueueTree } from '@/lib/queue/contract'

/** When the whole shell is dried out, and whether its pour holds; nothing where neither is known. */
export function Outlook({ tree, pour, now, timeZone }: { tree: QueueTree; pour: PourVerdict | null } & Moment) {
  if (tree.driedOut === null && pour === null) return null
  return (
    <p className="outlook">
      {tree.driedOut !== null && tree.next !== null && (
        <>
          Dried out{' '}
          {tree.driedOut.likelyAt === null ? (
            'further off than the forecast'
          ) : (
            <>
              <TimePair pair={tree.driedOut} now={now} timeZone={timeZone} />
              {tree.isUncalibrated && <span> ({NOT_CALIBRATED})</span>}
            </>
          )}
          {pour === null || tree.pourDate === null ? '.' : ': '}
        </>
      )}
      {pour !== null && tree.pourDate !== null && (
        <span className={pour === 'will miss' || pour === 'passed' ? 'text-furnace-ink' : pour === 'tight' ? 'text-ochre-ink' : ''}>
          {pour !== 'holds' && pour !== 'not in sight' && <Icon name="warning" />} {sentence(pourSentence(pour, tree.pourDate), tree)}.
        </span>
      )}
    </p>
  )
}

function sentence(words: string, tree: { driedOut: unknown; next: unknown }): string {
  // After the pair the verdict is the second half of a sentence; alone it begins one.
  return tree.driedOut !== null && tree.next !== null ? words : words.charAt(0).toUpperCase() + words.slice(1)
}
