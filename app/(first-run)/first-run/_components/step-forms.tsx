'use client'

import { KeyLink } from '@/app/_components/key'
import { Plate } from '@/app/_components/plate'
import { useEndStep } from '@/app/(first-run)/first-run/_components/use-end-step'
import { BathForm } from '@/app/(office)/settings/baths/_components/bath-form'
import { FoundryForm, type FoundryFormProps } from '@/app/(office)/settings/_components/foundry-form'
import { HoursForm } from '@/app/(office)/settings/hours/_components/hours-form'
import type { BathKind } from '@/lib/coats/bath-input'
import type { ShiftHours } from '@/lib/schedule/shifts'

// The settings' own forms; once they are saved, the step is ended and the next one opens.

export function FoundryStep(props: Omit<FoundryFormProps, 'onDone'>) {
  return <FoundryForm {...props} onDone={useEndStep('foundry')} />
}

export function HoursStep({ hours }: { hours: readonly ShiftHours[] }) {
  const endStep = useEndStep('hours')
  return (
    <>
      <Plate title="Shift hours" line="wall-clock time, also when the clocks change">
        <HoursForm hours={hours} onDone={endStep} />
      </Plate>
      <div className="step-foot">
        <KeyLink href="/first-run?step=foundry" size={56}>
          Back
        </KeyLink>
      </div>
    </>
  )
}

const PROPOSALS = { face: { name: 'Face slurry', kind: 'face' }, backup: { name: 'Backup slurry', kind: 'backup' } } as const

/** The first bath of a kind, with the name that it most likely has. */
export function FirstBath({ kind }: { kind: BathKind }) {
  return (
    <Plate title={kind === 'face' ? 'The face bath' : 'The backup bath'} line="take the name as it is, or type yours">
      <BathForm key={kind} proposal={PROPOSALS[kind]} />
    </Plate>
  )
}
