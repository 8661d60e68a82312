import type { Metadata } from 'next'
import { redirect } from 'next/navigation'
import { UnitsProvider } from '@/app/_components/units-context'
import { FirstRunFrame } from '@/app/(first-run)/first-run/_components/first-run-frame'
import { OwnerForm } from '@/app/(first-run)/first-run/_components/owner-form'
import { OwnerIsSettingUp } from '@/app/(first-run)/first-run/_components/owner-is-setting-up'
import { StepContent } from '@/app/(first-run)/first-run/_components/step-content'
import '@/app/(office)/office.css'
import { firstRunStep, isStepOpen } from '@/lib/foundry/first-run'
import { may } from '@/lib/members/roles'
import { loadFirstRun } from '@/lib/queries/first-run'
import { hasMembers } from '@/lib/queries/has-members'
import { currentMember } from '@/lib/server/auth'
import { asksForSetupCode } from '@/lib/server/setup-code'
import './first-run.css'

export const metadata: Metadata = { title: 'Set up your foundry' }

/**
 * The first run: for the first visitor of records without a member, the owner's account; then, for the owner, the steps that a shell
 * room cannot do without. Once it is ended, and for every stranger after the first, it leads to the floor.
 */
export default async function FirstRunPage({ searchParams }: PageProps<'/first-run'>) {
  const member = await currentMember()
  if (!member) {
    if (await hasMembers()) redirect('/floor')
    return <OwnerForm asksForCode={asksForSetupCode()} />
  }
  if (member.mustChangePassword) redirect('/me/password')
  if (member.isFoundrySetUp) redirect('/floor')
  if (!may(member.role, 'settings')) return <OwnerIsSettingUp name={member.name} />
  const [{ step: asked }, firstRun] = await Promise.all([searchParams, loadFirstRun()])
  const wanted = firstRunStep(typeof asked === 'string' ? asked : undefined)
  const step = wanted && isStepOpen(wanted, firstRun.reached) ? wanted : firstRun.reached
  return (
    <UnitsProvider units={member.units}>
      <FirstRunFrame step={step} reached={firstRun.reached}>
        {/* Another step is another page: nothing of the one before stays in its fields. */}
        <StepContent key={step} step={step} firstRun={firstRun} member={member} />
      </FirstRunFrame>
    </UnitsProvider>
  )
}
