import { ShellSection } from '@/app/_components/shell-section'
import { dayWord, formatDate } from '@/lib/format/local-time'
import type { TreeDetail } from '@/lib/trees/detail-contract'
import { sectionOf } from '@/lib/trees/section'
import { sectionBands } from '@/lib/trees/section-bands'
import { coatCaption } from '@/lib/trees/tree-verdict'
import type { Moment } from '@/app/(office)/_components/due-words'

const WIDTH = 1324
const HEIGHT = 160
/** A band narrower than this has room for a number and a word, not for a day. */
const ROOM_FOR_DAY = 88
const ROOM_FOR_WORD = 58

/** The shell section across the page, with a caption under each coat. */
export function BigSection({ detail, now, timeZone }: { detail: TreeDetail } & Moment) {
  const { tree, coats } = detail
  const drawing = sectionOf(tree)
  const { edges } = sectionBands(drawing, { width: WIDTH, height: HEIGHT })
  const dippedAt = new Map(coats.map((coat) => [coat.number, coat.on?.dippedAt ?? null]))
  return (
    <div className="big-section">
      <ShellSection {...drawing} height={HEIGHT} width={WIDTH} className="h-auto w-full" />
      {/* The coat log below says the same in a table. */}
      <div className="captions" aria-hidden="true">
        {edges.map(([inner, outer], index) => {
          const number = index + 1
          const width = outer - inner
          const stands = coatCaption(tree, number)
          const at = dippedAt.get(number)
          const day = at == null ? '' : dayWord(at, now, timeZone) === '' ? 'today' : formatDate(at, timeZone)
          return (
            <span
              key={number}
              className={stands === 'open' ? 'is-open' : undefined}
              style={{ left: `${(inner / WIDTH) * 100}%`, width: `${(width / WIDTH) * 100}%` }}
            >
              <b>{number}</b>
              {width >= ROOM_FOR_WORD && (drawing.coats[index]?.grade === 'seal' ? 'seal' : drawing.coats[index]?.grade)}
              {width >= ROOM_FOR_DAY && <i>{stands === 'open' ? (tree.state === 'unknown' ? 'on, unknown' : 'on, drying') : day}</i>}
            </span>
          )
        })}
      </div>
    </div>
  )
}
