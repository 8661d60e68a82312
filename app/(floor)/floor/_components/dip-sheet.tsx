'use client'

import Link from 'next/link'
import { useRef, useState } from 'react'
import { DemoMark } from '@/app/_components/demo-mark'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { ShellSection } from '@/app/_components/shell-section'
import { fittedTagHeight, Tag } from '@/app/_components/tag'
import { useUnits } from '@/app/_components/units-context'
import { usePress } from '@/app/_components/use-press'
import type { DipRefusal, DipRunAnswer } from '@/lib/coats/dip-contract'
import {
  checkDial,
  coatNumberOf,
  isEarly,
  needsReason,
  needsWallReading,
  readAloudLines,
  reasonAsk,
  runBody,
  stillToDip,
  type DialErrors,
  type DipDraft,
  type ReasonAsk,
  type RunBody,
} from '@/lib/floor/dip-draft'
import { coatsOnWords, dipWords } from '@/lib/format/coat-words'
import { splitName } from '@/lib/format/person-name'
import { stateWords } from '@/lib/format/state-words'
import type { Queue, QueueTree } from '@/lib/queue/contract'
import { sectionOf } from '@/lib/trees/section'
import { newOperationId } from '../_queries/operation-id'
import { refusalWords, type Outcome } from '../_queries/request-json'
import { postDips, postTouch, postWatch, refusedTrees } from '../_queries/writes'
import { DipChoices, draftSummary, PlaceChooser } from './dip-choices'
import { DipRefusals, type RefusalAnswer } from './dip-refusals'
import { DipWarnings, warningsOf } from './dip-warnings'
import { EvidencePanel, type Noted } from './evidence-panel'
import { ReasonChoice } from './reason-choice'
import { Sheet } from './sheet'
import { SheetProblem } from './sheet-problem'
import { WallReading } from './wall-reading'

export type Logged = {
  answer: DipRunAnswer
  bathName: string
  stucco: DipDraft['stucco']
  /** The times of the answer rest on starting values nobody has calibrated. */
  isUncalibrated: boolean
}

/** One attempt at a run: its id belongs to exactly this body, and both go out again until the server has answered. */
type Attempt = { choices: string; operationId: string; body: RunBody }

export type DipSheetProps = {
  queue: Queue
  draft: DipDraft
  trees: QueueTree[]
  now: number
  memberName: string
  onChange: (change: Partial<DipDraft>) => void
  onTrees: (treeIds: string[]) => void
  onClose: () => void
  onCancel: () => void
  onLogged: (logged: Logged) => void
  onNoted: (noted: Noted) => void
  /** A short word for everybody: 'You will be called …'. */
  onSaid: (words: string) => void
}

type Trouble = { title: string; detail?: string | undefined; mayRetry: boolean }

/** The dip sheet: one tree or a run. Warns, names what is unusual, and logs. */
export function DipSheet({
  queue,
  draft,
  trees,
  now,
  memberName,
  onChange,
  onTrees,
  onClose,
  onCancel,
  onLogged,
  onNoted,
  onSaid,
}: DipSheetProps) {
  const { timeZone } = queue.foundry
  const { temp: tempUnit } = useUnits()
  const [panel, setPanel] = useState<'sheet' | 'choices' | 'places' | 'evidence'>('sheet')
  const [wantsReason, setWantsReason] = useState(false)
  const [isSending, setIsSending] = useState(false)
  const [trouble, setTrouble] = useState<Trouble | null>(null)
  const [dialErrors, setDialErrors] = useState<DialErrors>({})
  const [refusals, setRefusals] = useState<DipRefusal[]>([])
  const [settled, setSettled] = useState<string[]>([])
  const attempt = useRef<Attempt | null>(null)
  const inFlight = useRef(false)

  const first = trees[0]
  const who = splitName(memberName)
  const warnings = warningsOf(trees)
  const toDip = stillToDip(draft, trees)
  const early = toDip.filter(isEarly)
  const withReason = toDip.filter(needsReason)
  const ask = reasonAsk(toDip)
  const hasWallDial = needsWallReading(draft, trees, queue.places)
  // Warnings and troubles need the room of the choices; those then stand in one line until somebody wants to change them.
  const isShort = (warnings.length > 0 || trouble !== null || (hasWallDial && trees.length > CHIPS_WITH_TITLE)) && panel === 'sheet'
  const aloud = readAloudLines(trees)
  // Two rows of chips: what is read aloud then stands under the heading, if it is one line.
  const isReadInHead = trees.length > CHIPS_WITH_TITLE && aloud.length <= 1
  // They were read before 'Change' was touched.
  const isCrowded = warnings.length > 0 && panel === 'choices'
  const tone = warnings.some((warning) => warning.level === 'stop') ? 'stop' : warnings.length > 0 ? 'warn' : 'plain'

  const change = (next: Partial<DipDraft>) => {
    setDialErrors({})
    onChange(next)
  }

  const send = async () => {
    if (inFlight.current || trees.length === 0) return
    if (withReason.length > 0 && draft.reason.trim() === '') {
      setWantsReason(true)
      setPanel('sheet')
      return
    }
    const dial = hasWallDial ? checkDial(draft.roomTemp, draft.roomHumidity, tempUnit) : null
    if (dial && !dial.room) {
      setDialErrors(dial.errors)
      return
    }
    // After a failed send the very same body goes out under the very same id, its time too: the first may have arrived.
    const choices = JSON.stringify([{ ...draft, treeIds: [] }, trees.map((tree) => tree.id)])
    if (attempt.current?.choices !== choices) {
      attempt.current = { choices, operationId: newOperationId(), body: runBody(draft, trees, now, dial?.room ?? null) }
    }
    const { operationId, body } = attempt.current
    inFlight.current = true
    setIsSending(true)
    setTrouble(null)
    const outcome = await postDips({ operationId, ...body })
    inFlight.current = false
    setIsSending(false)
    if (outcome.kind === 'done') {
      const bathName = queue.baths.find((bath) => bath.id === body.bathId)?.name ?? 'the bath'
      onLogged({ answer: outcome.data, bathName, stucco: body.stucco, isUncalibrated: trees.some((tree) => tree.isPlanUncalibrated) })
      return
    }
    setPanel('sheet')
    if (outcome.kind === 'unreachable') {
      setTrouble({ title: 'Not logged yet. Try again', detail: outcome.detail, mayRetry: true })
      return
    }
    // Refused: nothing was written, so the next try is a new one.
    attempt.current = null
    const refused = refusedTrees(outcome.problem.trees)
    if (refused.length === 0) {
      setTrouble({ title: 'Not logged', detail: refusalWords(outcome.status, outcome.problem), mayRetry: false })
      return
    }
    setRefusals(refused)
  }

  const answerRefusal = (refusal: DipRefusal, answer: RefusalAnswer) => {
    const left = refusals.filter((candidate) => candidate.treeId !== refusal.treeId)
    if (answer === 'next one') {
      onChange({ coatNumbers: { ...draft.coatNumbers, [refusal.treeId]: refusal.coatNumber + 1 } })
      setSettled((words) => [...words, `${refusal.tag} goes in as dip ${refusal.coatNumber + 1}.`])
    } else {
      onTrees(draft.treeIds.filter((id) => id !== refusal.treeId))
      setSettled((words) => [
        ...words,
        answer === 'same dip'
          ? `${refusal.tag}: yours was the same dip, it is on the log once.`
          : refusal.reason === 'coat already on'
            ? `${refusal.tag}: tell the supervisor that coat ${refusal.coatNumber} was logged twice.`
            : `${refusal.tag} is left out.`,
      ])
    }
    setRefusals(left)
  }

  const sayForAll = async (post: (tree: QueueTree) => Promise<Outcome<unknown>>, words: string) => {
    if (inFlight.current) return
    inFlight.current = true
    setIsSending(true)
    setTrouble(null)
    const outcomes = await Promise.all(early.map(post))
    inFlight.current = false
    setIsSending(false)
    const failed = outcomes.find((outcome) => outcome.kind !== 'done')
    if (failed === undefined) {
      onSaid(words)
    } else if (failed.kind === 'unreachable') {
      setTrouble({ title: 'Not noted yet. Try again', detail: failed.detail, mayRetry: false })
    } else if (failed.kind === 'refused') {
      setTrouble({ title: 'Not noted', detail: refusalWords(failed.status, failed.problem), mayRetry: false })
    }
  }

  const isSettling = refusals.length > 0 || settled.length > 0
  const label = trees.length === 1 && first ? `Dip ${first.tag}` : `Dip run of ${trees.length}`
  const goWords = isSending ? 'Logging' : trouble?.mayRetry ? 'Try again' : logWords(trees, draft, { ask, isAsking: wantsReason })

  return (
    <Sheet
      label={label}
      tone={tone}
      isStaying={isSending || trouble !== null || isSettling}
      onClose={onClose}
      {...(trees.length === 1 && first
        ? {
            lead: <Tag tag={first.tag} height={fittedTagHeight(first.tag, 60)} isLink isHeld={first.state === 'held'} />,
            heading: first.title,
            under: `${coatsOnWords(first)}, ${first.place.name}. ${stateWords(first.state, first.stateSince, now)}.`,
            aside: hasWallDial && warnings.length === 0 ? <ShellSection {...sectionOf(first)} height={40} width={200} /> : undefined,
          }
        : { heading: `Dip run, ${trees.length} trees`, under: isReadInHead ? aloud[0] : undefined })}
      foot={
        isSettling && trees.length === 0 ? (
          <Key size={80} tone="go" className="sheet-go" onPress={onCancel}>
            Done
          </Key>
        ) : (
          <>
            <Key
              size={80}
              onPress={panel === 'places' ? () => setPanel('choices') : panel === 'evidence' ? () => setPanel('sheet') : onCancel}
            >
              {panel === 'places' || panel === 'evidence' ? 'Back' : 'Cancel'}
            </Key>
            {trees.length === 1 && panel !== 'places' && panel !== 'evidence' && !isSettling && (
              <Key size={80} icon="hand" className="sheet-evidence" onPress={() => setPanel('evidence')}>
                How dry?
              </Key>
            )}
            <span className="sheet-who">
              Who
              <b title={memberName}>
                {who.first}
                {who.rest !== '' && <span className="vh"> {who.rest}</span>}
              </b>
            </span>
            {panel !== 'evidence' && (
              <Key
                size={80}
                tone={withReason.length > 0 ? 'early' : 'go'}
                className="sheet-go"
                isOff={isSending || refusals.length > 0 || panel === 'places'}
                onPress={() => void send()}
              >
                {refusals.length > 0 ? 'Answer first, then log the rest' : goWords}
              </Key>
            )}
          </>
        )
      }
    >
      {panel === 'places' ? (
        <PlaceChooser
          queue={queue}
          chosenId={draft.placeId}
          onChoose={(placeId) => {
            change({ placeId })
            setPanel('choices')
          }}
        />
      ) : panel === 'evidence' && first ? (
        <EvidencePanel tree={first} draft={draft} now={now} timeZone={timeZone} onChange={onChange} onNoted={onNoted} />
      ) : isSettling ? (
        <>
          <DipRefusals refusals={refusals} now={now} timeZone={timeZone} onAnswer={answerRefusal} />
          {settled.length > 0 && (
            <ul className="grid gap-2 text-22" aria-live="polite">
              {settled.map((words) => (
                <li key={words}>{words}</li>
              ))}
              {refusals.length === 0 && trees.length > 0 && <li>Nothing of this run is logged yet: one touch logs the rest.</li>}
            </ul>
          )}
          {trouble && <SheetProblem title={trouble.title} detail={trouble.detail} />}
        </>
      ) : (
        <>
          {trees.length > 1 && <Chips trees={trees} draft={draft} onTrees={onTrees} />}
          {trees.length === 1 && first && !hasWallDial && !isCrowded && (
            <ShellSection {...sectionOf(first)} height={40} width={692} className="sheet-section h-auto max-w-full" />
          )}
          {!isCrowded && <DipWarnings trees={trees} now={now} timeZone={timeZone} />}
          {!isCrowded && !isReadInHead && !(wantsReason && hasWallDial) && <ReadAloud lines={aloud} />}
          {isShort ? (
            <>
              {early.length > 0 && !wantsReason && (
                <div className="two-keys">
                  <Key
                    size={64}
                    icon="bell"
                    onPress={() =>
                      void sayForAll(
                        (tree) => postWatch(tree.id),
                        `You will be called when ${early.map((tree) => tree.tag).join(', ')} may be dipped.`,
                      )
                    }
                  >
                    Wait, call me when dry
                  </Key>
                  {trees.length > 1 && (
                    <Key
                      size={64}
                      icon="hand"
                      onPress={() =>
                        void sayForAll(
                          (tree) => postTouch(tree, 'dry'),
                          `Noted: ${early.map((tree) => tree.tag).join(', ')} felt dry where they dry last.`,
                        )
                      }
                    >
                      All felt dry: say so
                    </Key>
                  )}
                </div>
              )}
              {wantsReason && ask && (
                <ReasonChoice label={ask.question} presets={ask.presets} reason={draft.reason} onReason={(reason) => change({ reason })} />
              )}
              <div className="sheet-summary">
                <span>{draftSummary(draft, trees, queue, now)}</span>
                <Key
                  size={64}
                  onPress={() => {
                    setTrouble(null)
                    setPanel('choices')
                  }}
                >
                  Change
                </Key>
              </div>
            </>
          ) : (
            <DipChoices draft={draft} trees={trees} queue={queue} now={now} onChange={change} onPlaces={() => setPanel('places')} />
          )}
          {hasWallDial && (
            <WallReading
              temp={draft.roomTemp}
              humidity={draft.roomHumidity}
              errors={dialErrors}
              words={wallWords(draft, trees, queue)}
              onTemp={(roomTemp) => change({ roomTemp })}
              onHumidity={(roomHumidity) => change({ roomHumidity })}
            />
          )}
          {trouble && <SheetProblem title={trouble.title} detail={trouble.detail} />}
        </>
      )}
    </Sheet>
  )
}

function logWords(trees: readonly QueueTree[], draft: DipDraft, { ask, isAsking }: { ask: ReasonAsk | null; isAsking: boolean }): string {
  const [only] = trees
  const dips = trees.length === 1 && only ? dipWords(coatNumberOf(draft, only), only.next?.kind ?? 'backup') : `${trees.length} dips`
  if (!ask) return `Log ${dips}`
  if (draft.reason.trim() !== '') return ask.keyWithReason(dips)
  return isAsking ? 'Say why first' : ask.keyWithout
}

function wallWords(draft: DipDraft, trees: readonly QueueTree[], queue: Queue): string {
  const place = queue.places.find(
    (candidate) =>
      candidate.needsTypedReading &&
      (draft.placeId === null ? trees.some((tree) => tree.place.id === candidate.id) : candidate.id === draft.placeId),
  )
  return `The air at ${place?.name ?? 'this place'} is read by hand. Read the dial there.`
}

/** What the recipe says to do before the dip. */
function ReadAloud({ lines }: { lines: readonly string[] }) {
  if (lines.length === 0) return null
  return (
    <p className={`read-aloud ${lines.length > 1 ? 'read-aloud-many' : ''}`}>
      <Icon name="hand" />
      <span>
        {lines.map((line) => (
          <span key={line} className="block">
            {line}
          </span>
        ))}
      </span>
    </p>
  )
}

/** One row of chips has room for titles; two rows are the most that leave the choices their place. */
const CHIPS_WITH_TITLE = 3
const CHIPS_MOST = 6

function Chips({ trees, draft, onTrees }: { trees: readonly QueueTree[]; draft: DipDraft; onTrees: (ids: string[]) => void }) {
  const [isAll, setIsAll] = useState(false)
  const toggle = usePress(() => setIsAll(!isAll))
  const shown = isAll ? trees : trees.slice(0, trees.length > CHIPS_MOST ? CHIPS_MOST - 1 : CHIPS_MOST)
  return (
    <ul className={`chips ${trees.length > CHIPS_WITH_TITLE ? 'chips-many' : ''}`}>
      {shown.map((tree) => (
        <Chip
          key={tree.id}
          tree={tree}
          number={coatNumberOf(draft, tree)}
          onRemove={() => onTrees(draft.treeIds.filter((id) => id !== tree.id))}
        />
      ))}
      {trees.length > CHIPS_MOST && (
        <li className="chips-rest">
          <button type="button" {...toggle} aria-expanded={isAll}>
            <b>{isAll ? 'Fewer' : `and ${trees.length - shown.length} more`}</b>
            <Icon name={isAll ? 'up' : 'down'} />
          </button>
        </li>
      )}
    </ul>
  )
}

function Chip({ tree, number, onRemove }: { tree: QueueTree; number: number; onRemove: () => void }) {
  const press = usePress(onRemove)
  return (
    <li>
      <div>
        <Link className="chip-tag" href={`/trees/${encodeURIComponent(tree.tag)}`} prefetch={false} aria-label={`Page of ${tree.tag}`}>
          <Tag tag={tree.tag} height={fittedTagHeight(tree.tag, 32)} />
        </Link>
        <b>dip {number}</b>
        <button type="button" {...press} aria-label={`Take ${tree.tag} out of the run`}>
          <Icon name="cross" />
        </button>
      </div>
      <span>
        {tree.isDemo && <DemoMark />} {tree.title}
      </span>
    </li>
  )
}
