import { useId, useRef, useState } from 'react'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { useUnits } from '@/app/_components/units-context'
import type { Spot, WeighingMoment } from '@/lib/coats/vocabulary'
import type { DipDraft } from '@/lib/floor/dip-draft'
import { UNIT_SIGNS } from '@/lib/format/units'
import type { QueueTree } from '@/lib/queue/contract'
import { likelyMoment, movedWords, readMass, readSurfaceTemp, type Read } from '@/lib/trees/evidence-draft'
import { newOperationId } from '../_queries/operation-id'
import { refusalWords } from '../_queries/request-json'
import { postEvidence, type EvidenceBody } from '../_queries/writes'
import { SheetProblem } from './sheet-problem'

/** What was kept, for the foot of the floor: it can be withdrawn there. */
export type Noted = { evidenceId: string; words: string }

export type EvidencePanelProps = {
  tree: QueueTree
  draft: Pick<DipDraft, 'weight' | 'surfaceTemp'>
  now: number
  timeZone: string
  onChange: (change: Partial<DipDraft>) => void
  onNoted: (noted: Noted) => void
}

type Ask = { kind: 'weighing' } | { kind: 'surface temperature'; spot: Spot }
type Trouble = { title: string; detail: string }

const SPOT_HEADS: Record<Spot, string> = { outside: 'Outside', recess: 'In the recess', core: 'In the core' }
const MOMENTS: { moment: WeighingMoment; word: string }[] = [
  { moment: 'before dip', word: 'Before the dip' },
  { moment: 'after stucco', word: 'After the stucco' },
  { moment: 'now', word: 'While drying' },
]

/** What a wet glove can say of the newest coat: one touch for a feel or a colour, a number for the scale and the thermometer. */
export function EvidencePanel({ tree, draft, now, timeZone, onChange, onNoted }: EvidencePanelProps) {
  const units = useUnits()
  const [ask, setAsk] = useState<Ask | null>(tree.newestCoat === null ? { kind: 'weighing' } : null)
  const [moment, setMoment] = useState<WeighingMoment>(() => likelyMoment(tree, now))
  const [isSending, setIsSending] = useState(false)
  const [trouble, setTrouble] = useState<Trouble | null>(null)
  const [problem, setProblem] = useState<string | null>(null)
  // One id for one thing said: after silence the same words go out under it again.
  const attempt = useRef<{ body: string; operationId: string } | null>(null)
  const inFlight = useRef(false)

  const send = async (body: EvidenceBody) => {
    if (inFlight.current) return
    const text = JSON.stringify(body)
    if (attempt.current?.body !== text) attempt.current = { body: text, operationId: newOperationId() }
    inFlight.current = true
    setIsSending(true)
    setTrouble(null)
    const outcome = await postEvidence(tree.id, attempt.current.operationId, body)
    inFlight.current = false
    setIsSending(false)
    if (outcome.kind === 'done') {
      onChange({ weight: '', surfaceTemp: '' })
      onNoted({ evidenceId: outcome.data.evidenceId, words: `${tree.tag}: noted. ${movedWords(outcome.data, now, timeZone)}` })
    } else if (outcome.kind === 'unreachable') {
      setTrouble({ title: 'Not noted yet. Try again', detail: outcome.detail })
    } else {
      attempt.current = null
      setTrouble({ title: 'Not noted', detail: refusalWords(outcome.status, outcome.problem) })
    }
  }

  const coatNumber = tree.coatsOn
  const typed = ask?.kind === 'weighing' ? draft.weight : draft.surfaceTemp
  const sendTyped = () => {
    if (ask === null) return
    const number: Read = ask.kind === 'weighing' ? readMass(typed, units.mass) : readSurfaceTemp(typed, units.temp)
    setProblem(number.problem)
    if (number.value === null) return
    if (ask.kind === 'weighing') void send({ kind: 'weighing', coatNumber, moment, massKg: number.value })
    else void send({ kind: 'surface temperature', coatNumber, spot: ask.spot, surfaceTempC: number.value })
  }

  if (ask !== null) {
    const change = (text: string) => {
      setProblem(null)
      onChange(ask.kind === 'weighing' ? { weight: text } : { surfaceTemp: text })
    }
    return (
      <>
        {ask.kind === 'weighing' && tree.newestCoat !== null && (
          <fieldset className="choice" aria-label="When it hung on the scale">
            <span className="choice-label">When</span>
            <div>
              {MOMENTS.map(({ moment: other, word }) => (
                <Key key={other} size={64} isChosen={moment === other} onPress={() => setMoment(other)}>
                  <span>{word}</span>
                </Key>
              ))}
            </div>
          </fieldset>
        )}
        <NumberPad
          label={ask.kind === 'weighing' ? 'Weight' : `Surface, ${SPOT_HEADS[ask.spot].toLowerCase()}`}
          unit={ask.kind === 'weighing' ? UNIT_SIGNS[units.mass] : UNIT_SIGNS[units.temp]}
          value={typed}
          problem={problem}
          onChange={change}
        />
        <div className="two-keys">
          {tree.newestCoat !== null && (
            <Key
              size={64}
              onPress={() => {
                setProblem(null)
                setTrouble(null)
                setAsk(null)
              }}
            >
              Something else
            </Key>
          )}
          <Key size={64} tone="go" isOff={isSending} onPress={sendTyped}>
            {isSending ? 'Noting' : 'Note it'}
          </Key>
        </div>
        {trouble && <SheetProblem title={trouble.title} detail={trouble.detail} />}
      </>
    )
  }

  const hasCore = tree.spots.includes('core')
  return (
    <>
      {tree.spots.length > 1 && (
        <p className="text-22">An outside that is dry frees nothing here: the {hasCore ? 'core' : 'recess'} dries last.</p>
      )}
      {tree.spots.map((spot) => (
        <fieldset key={spot} className="choice evidence-spot" aria-label={SPOT_HEADS[spot]}>
          <span className="choice-label">{SPOT_HEADS[spot]}</span>
          <div>
            <Key size={64} icon="check" isOff={isSending} onPress={() => void send({ kind: 'touch', coatNumber, spot, verdict: 'dry' })}>
              Felt dry
            </Key>
            <Key size={64} icon="drop" isOff={isSending} onPress={() => void send({ kind: 'touch', coatNumber, spot, verdict: 'not yet' })}>
              Not yet
            </Key>
            <Key size={64} isOff={isSending} onPress={() => void send({ kind: 'colour', coatNumber, spot, verdict: 'dry' })}>
              Dry colour
            </Key>
            <Key size={64} isOff={isSending} onPress={() => void send({ kind: 'colour', coatNumber, spot, verdict: 'not yet' })}>
              Wet colour
            </Key>
            <Key size={64} onPress={() => setAsk({ kind: 'surface temperature', spot })}>
              {UNIT_SIGNS[units.temp]}
            </Key>
          </div>
        </fieldset>
      ))}
      <div className="two-keys">
        <Key size={64} onPress={() => setAsk({ kind: 'weighing' })}>
          Weigh it
        </Key>
      </div>
      {trouble && <SheetProblem title={trouble.title} detail={trouble.detail} />}
    </>
  )
}

const PAD = ['1', '2', '3', '4', '5', '6', '7', '8', '9', ',', '0'] as const
/** Keys of a pad are pressed fast one after another. */
const PAD_DEAF_MS = 60
const LONGEST = 8

type NumberPadProps = { label: string; unit: string; value: string; problem: string | null; onChange: (text: string) => void }

/** A number by large keys; a keyboard may type it too. */
function NumberPad({ label, unit, value, problem, onChange }: NumberPadProps) {
  const id = useId()
  return (
    <div className="number-pad">
      <label className="wall-dial" htmlFor={id} data-wrong={problem !== null}>
        <span>{label}</span>
        <span>
          <input
            id={id}
            // The keys below are larger than those of the tablet's own keyboard.
            inputMode="none"
            autoComplete="off"
            value={value}
            aria-invalid={problem !== null || undefined}
            aria-describedby={`${id}-problem`}
            onChange={(event) => onChange(event.target.value.slice(0, LONGEST))}
          />
          <small className="num">{unit}</small>
        </span>
      </label>
      <div className="wall-words" id={`${id}-problem`} aria-live="polite">
        {problem !== null && (
          <p className="wall-error">
            <Icon name="warning" />
            <span>{problem}</span>
          </p>
        )}
      </div>
      <div className="number-keys">
        {PAD.map((digit) => (
          <Key key={digit} size={64} deafMs={PAD_DEAF_MS} onPress={() => onChange(`${value}${digit}`.slice(0, LONGEST))}>
            {digit}
          </Key>
        ))}
        <Key size={64} deafMs={PAD_DEAF_MS} aria-label="Take the last digit away" onPress={() => onChange(value.slice(0, -1))}>
          ⌫
        </Key>
      </div>
    </div>
  )
}
