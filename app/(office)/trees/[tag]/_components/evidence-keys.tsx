'use client'

import { useState, type FormEvent } from 'react'
import { Field, FieldError, SelectField } from '@/app/_components/field'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { useUnits } from '@/app/_components/units-context'
import { useOperation } from '@/app/(office)/_components/use-operation'
import type { Spot, WeighingMoment } from '@/lib/coats/vocabulary'
import { formText } from '@/lib/format/form-text'
import { UNIT_SIGNS } from '@/lib/format/units'
import type { QueueTree } from '@/lib/queue/contract'
import { likelyMoment, movedWords, readMass, readSurfaceTemp } from '@/lib/trees/evidence-draft'
import type { EvidenceAnswer } from '@/lib/trees/evidence-input'

export type EvidenceKeysProps = {
  tree: Pick<QueueTree, 'id' | 'coatsOn' | 'spots' | 'newestCoat' | 'state'>
  /** Newest word on this coat, already in words. */
  said: string | null
  now: number
  timeZone: string
}

const SPOT_WORDS: Record<Spot, string> = { outside: 'Outside', recess: 'In the recess', core: 'In the core' }
const MOMENT_WORDS: Record<WeighingMoment, string> = {
  'before dip': 'before the dip',
  'after stucco': 'after the stucco',
  now: 'while drying',
}

/** What a person weighs, feels and sees on the newest coat: a feel in one press, a number in two. */
export function EvidenceKeys({ tree, said, now, timeZone }: EvidenceKeysProps) {
  const evidence = useOperation<EvidenceAnswer>(`/api/v1/trees/${tree.id}/evidence`)
  const isBareWax = tree.newestCoat === null
  const [spot, setSpot] = useState<Spot>(tree.spots.at(-1) ?? 'outside')
  const [isOpen, setIsOpen] = useState(isBareWax)
  const coatNumber = tree.coatsOn
  const give = (body: Record<string, unknown>) => evidence.send({ coatNumber, ...body })
  const slowest = tree.spots.at(-1) ?? 'outside'

  return (
    <div className="evidence-keys">
      {!isBareWax && (
        <>
          {tree.spots.length > 1 && (
            <div className="spot-keys" role="group" aria-label="Where on the shell">
              {tree.spots.map((other) => (
                <Key key={other} isChosen={spot === other} onPress={() => setSpot(other)}>
                  {SPOT_WORDS[other]}
                </Key>
              ))}
              {spot !== slowest && <p>An outside that is dry frees nothing: the {slowest} dries last.</p>}
            </div>
          )}
          <div className="look-pair" role="group" aria-label={`How dry it is ${SPOT_WORDS[spot].toLowerCase()}`}>
            <Key icon="check" isOff={evidence.isPending} onPress={() => give({ kind: 'touch', spot, verdict: 'dry' })}>
              Felt dry
            </Key>
            <Key icon="drop" isOff={evidence.isPending} onPress={() => give({ kind: 'touch', spot, verdict: 'not yet' })}>
              Not yet
            </Key>
            <Key aria-expanded={isOpen} onPress={() => setIsOpen(!isOpen)}>
              Weigh, measure, colour
            </Key>
          </div>
        </>
      )}
      {isOpen && (
        <div className="evidence-more">
          {!isBareWax && (
            <div className="look-pair" role="group" aria-label={`Colour of the binder ${SPOT_WORDS[spot].toLowerCase()}`}>
              <Key isOff={evidence.isPending} onPress={() => give({ kind: 'colour', spot, verdict: 'dry' })}>
                Dry colour
              </Key>
              <Key isOff={evidence.isPending} onPress={() => give({ kind: 'colour', spot, verdict: 'not yet' })}>
                Wet colour
              </Key>
            </div>
          )}
          <Weighing tree={tree} now={now} isOff={evidence.isPending} onGive={give} />
          {!isBareWax && <Surface spot={spot} isOff={evidence.isPending} onGive={give} />}
        </div>
      )}
      <p className="look-said" role="status">
        {evidence.problem !== null ? (
          <span className="field-error">
            <Icon name="warning" />
            <span>{evidence.problem}</span>
          </span>
        ) : evidence.answer !== null ? (
          `Noted. ${movedWords(evidence.answer, now, timeZone)}`
        ) : (
          said
        )}
      </p>
    </div>
  )
}

type NumberFormProps = { isOff: boolean; onGive: (body: Record<string, unknown>) => void }

function Weighing({ tree, now, isOff, onGive }: { tree: EvidenceKeysProps['tree']; now: number } & NumberFormProps) {
  const { mass } = useUnits()
  const [problem, setProblem] = useState<string | undefined>()
  const weigh = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const form = new FormData(event.currentTarget)
    const read = readMass(formText(form, 'weight'), mass)
    setProblem(read.problem ?? undefined)
    if (read.value !== null) onGive({ kind: 'weighing', moment: form.get('moment') ?? 'before dip', massKg: read.value })
  }
  return (
    <form className="evidence-form" noValidate onSubmit={weigh}>
      <Field name="weight" label="Weight" unit={UNIT_SIGNS[mass]} inputMode="decimal" autoComplete="off" error={problem} />
      {tree.newestCoat !== null && (
        <SelectField name="moment" label="When" defaultValue={likelyMoment(tree, now)}>
          {Object.entries(MOMENT_WORDS).map(([moment, words]) => (
            <option key={moment} value={moment}>
              {words}
            </option>
          ))}
        </SelectField>
      )}
      <Key type="submit" tone="ink" isOff={isOff}>
        {tree.newestCoat === null ? 'Note the weight before the dip' : 'Note the weight'}
      </Key>
    </form>
  )
}

function Surface({ spot, isOff, onGive }: { spot: Spot } & NumberFormProps) {
  const { temp } = useUnits()
  const [problem, setProblem] = useState<string | undefined>()
  const measure = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const read = readSurfaceTemp(formText(new FormData(event.currentTarget), 'surface'), temp)
    setProblem(read.problem ?? undefined)
    if (read.value !== null) onGive({ kind: 'surface temperature', spot, surfaceTempC: read.value })
  }
  return (
    <form className="evidence-form" noValidate onSubmit={measure}>
      <Field
        name="surface"
        label={`Surface, ${SPOT_WORDS[spot].toLowerCase()}`}
        unit={UNIT_SIGNS[temp]}
        inputMode="decimal"
        autoComplete="off"
        hint="By an infrared thermometer set to 0.94. The air beside it comes from the sensor."
      />
      <FieldError id={`surface-${spot}`} error={problem} />
      <Key type="submit" tone="ink" isOff={isOff}>
        Note the temperature
      </Key>
    </form>
  )
}
