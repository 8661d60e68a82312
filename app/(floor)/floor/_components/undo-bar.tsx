'use client'

import { useEffect, useEffectEvent, useRef, useState } from 'react'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { stuccoWord } from '@/lib/format/coat-words'
import { formatClock } from '@/lib/format/local-time'
import { NOT_CALIBRATED, timePairWords } from '@/lib/format/time-pair'
import { newOperationId } from '../_queries/operation-id'
import { refusalWords } from '../_queries/request-json'
import { postUndo, postWithdrawal } from '../_queries/writes'
import type { Logged } from './dip-sheet'
import type { Noted } from './evidence-panel'

const UNDO_S = 20

/** A word at the foot of the floor: a logged run that may be taken back, evidence that may be withdrawn, or a short note. */
export type FootWord = { id: number; at: number } & (
  | { kind: 'logged'; logged: Logged }
  | { kind: 'noted'; noted: Noted }
  | { kind: 'note'; words: string }
)

export type UndoBarProps = { word: FootWord; now: number; timeZone: string; onGone: () => void; onTakenBack: (words: string) => void }

/** Stands 20 s; read out politely. Taking back needs no question before it: the log keeps both. */
export function UndoBar({ word, now, timeZone, onGone, onTakenBack }: UndoBarProps) {
  const [left, setLeft] = useState(UNDO_S)
  const [trouble, setTrouble] = useState<string | null>(null)
  const [isSending, setIsSending] = useState(false)
  const inFlight = useRef(false)
  const operationId = useRef<string | null>(null)
  const gone = useEffectEvent(onGone)
  // While taking back has not worked the bar stays: the run is still on the log.
  const isRunning = !isSending && trouble === null

  useEffect(() => {
    if (!isRunning) return undefined
    const timer = setInterval(() => setLeft((seconds) => Math.max(0, seconds - 1)), 1000)
    return () => clearInterval(timer)
  }, [isRunning])

  useEffect(() => {
    if (left === 0) gone()
  }, [left])

  const undo = async (what: { logged: Logged } | { noted: Noted }) => {
    if (inFlight.current) return
    inFlight.current = true
    setIsSending(true)
    setTrouble(null)
    operationId.current ??= newOperationId()
    const outcome =
      'noted' in what
        ? await postWithdrawal(what.noted.evidenceId, operationId.current)
        : await postUndo(
            operationId.current,
            what.logged.answer.coats.map((coat) => coat.coatId),
          )
    inFlight.current = false
    setIsSending(false)
    if (outcome.kind === 'done') {
      onTakenBack(
        'noted' in what
          ? 'Withdrawn: the time stands as it did before.'
          : `Taken back: ${dipsWord(what.logged.answer.coats.length)}, ${tagsOf(what.logged)}. The coats below dry on.`,
      )
      return
    }
    if (outcome.kind === 'refused') operationId.current = null
    setTrouble(
      outcome.kind === 'refused' ? refusalWords(outcome.status, outcome.problem) : `Not taken back yet. ${outcome.detail} Try again.`,
    )
  }

  if (word.kind === 'note') {
    return (
      // oxlint-disable-next-line jsx-a11y/prefer-tag-over-role -- an output element takes no blocks
      <div className="undo" role="status">
        <Icon name="check" />
        <div>
          <b>{word.words}</b>
        </div>
        <Key size={64} className="undo-done" onPress={onGone}>
          Done
        </Key>
        <i className="undo-left" aria-hidden="true" />
      </div>
    )
  }

  const isNoted = word.kind === 'noted'
  return (
    // oxlint-disable-next-line jsx-a11y/prefer-tag-over-role -- an output element takes no blocks
    <div className="undo" role="status">
      <Icon name={trouble ? 'warning' : 'check'} className={trouble ? 'undo-trouble' : ''} />
      <div>
        <b>
          {isNoted ? 'Noted' : `${dipsWord(word.logged.answer.coats.length)} logged`} at {formatClock(word.at, timeZone)}
        </b>
        <span>{trouble ?? (isNoted ? word.noted.words : loggedSentence(word.logged, now, timeZone))}</span>
      </div>
      <Key size={64} icon="undo" isOff={isSending} onPress={() => void undo(word)} aria-label={isNoted ? 'Withdraw' : 'Undo'}>
        {isSending ? 'Taking back' : `${isNoted ? 'Withdraw' : 'Undo'}, ${left} s`}
      </Key>
      <Key size={64} className="undo-done" onPress={onGone}>
        Done
      </Key>
      {isRunning && <i className="undo-left" aria-hidden="true" />}
    </div>
  )
}

const dipsWord = (count: number) => (count === 1 ? '1 dip' : `${count} dips`)

function tagsOf({ answer }: Logged): string {
  const tags = answer.coats.map((coat) => coat.tag)
  return tags.length > 6 ? `${tags.slice(0, 6).join(', ')} and ${tags.length - 6} more` : tags.join(', ')
}

/** 'T-118, T-120 in Backup slurry, coarse. Likely 21:25, safe 22:30. T-120: other bath.' */
function loggedSentence(logged: Logged, now: number, timeZone: string): string {
  const [first, ...others] = logged.answer.coats
  if (!first) return ''
  const pair = timePairWords(first, now, timeZone).text
  const note = logged.isUncalibrated ? `, ${NOT_CALIBRATED}` : ''
  const isSame = others.every((coat) => timePairWords(coat, now, timeZone).text === pair)
  const when =
    first.likelyAt === null && first.safeAt === null
      ? ''
      : isSame
        ? `${pair.charAt(0).toUpperCase()}${pair.slice(1)}${note}.`
        : `${first.tag} ${pair}${note}.`
  const unusual = logged.answer.coats
    .filter((coat) => coat.deviations.length > 0)
    .map((coat) => `${coat.tag}: ${coat.deviations.join(', ')}`)
  const stucco = logged.stucco === 'none' ? 'no stucco' : stuccoWord(logged.stucco).toLowerCase()
  return [`${tagsOf(logged)} in ${logged.bathName}, ${stucco}.`, when, unusual.length > 0 ? `Not as planned: ${unusual.join('; ')}.` : '']
    .filter(Boolean)
    .join(' ')
}
