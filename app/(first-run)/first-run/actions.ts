'use server'

import { headers } from 'next/headers'
import { redirect } from 'next/navigation'
import { z } from 'zod'
import { endFirstRun, endFirstRunStep } from '@/lib/commands/first-run'
import { makeFirstOwner } from '@/lib/commands/make-first-owner'
import { takeStarterRecipes } from '@/lib/commands/take-starter-recipes'
import { systemClock as clock } from '@/lib/core/clock'
import { layDemo } from '@/lib/demo/lay-demo'
import { FIRST_RUN_STEPS, stepAfter, type FirstRunStep } from '@/lib/foundry/first-run'
import { firstOwnerInput } from '@/lib/members/first-owner-input'
import { STARTER_KEYS } from '@/lib/recipes/starter-recipes'
import { moveToSession, requireMember, requireNobody } from '@/lib/server/auth'
import { answerForm, type FormState } from '@/lib/server/form-state'
import { requireOwnHost } from '@/lib/server/origin'
import { fieldErrors } from '@/lib/trees/tree-form-values'

/** Makes the owner's account, and signs them in with it. */
export async function makeFirstOwnerAction(_previous: FormState, form: FormData): Promise<FormState> {
  await requireNobody()
  const text = (field: string) => form.get(field) ?? ''
  const parsed = firstOwnerInput.safeParse({
    name: text('name'),
    email: text('email'),
    password: text('password'),
    setupCode: text('setupCode'),
    timeZone: text('timeZone'),
  })
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  const sent = await headers()
  const userAgent = sent.get('user-agent') ?? ''
  return answerForm(async () => {
    requireOwnHost(sent.get('host'))
    const { memberId, sessionId } = await makeFirstOwner(parsed.data, { userAgent, clock })
    await moveToSession(memberId, sessionId)
    redirect('/first-run')
  })
}

const stepInput = z.enum(FIRST_RUN_STEPS)

/** Ends a step; the page then goes on to the next one. */
export async function endStepAction(step: FirstRunStep): Promise<FormState> {
  await requireMember('settings')
  return answerForm(async () => {
    await endFirstRunStep(stepInput.parse(step))
    return { status: 'done', text: 'Saved.' }
  })
}

const starterKeys = z.array(z.enum(STARTER_KEYS))

/** Takes the ticked recipes, and goes on. */
export async function takeStarterRecipesAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('recipes')
  const keys = starterKeys.parse(form.getAll('starter'))
  return answerForm(async () => {
    if (keys.length > 0) await takeStarterRecipes(keys, { member, clock })
    await endFirstRunStep('recipes')
    redirect(`/first-run?step=${stepAfter('recipes')}`)
  })
}

const LEADS_TO = { tree: '/trees/new', floor: '/floor' } as const

/** Ends the first run. */
export async function endFirstRunAction(goTo: keyof typeof LEADS_TO): Promise<FormState> {
  const member = await requireMember('settings')
  return answerForm(async () => {
    await endFirstRun({ member, clock })
    redirect(LEADS_TO[goTo === 'tree' ? 'tree' : 'floor'])
  })
}

/** Ends it with the demo data laid over the empty floor. */
export async function lookWithDemoAction(): Promise<FormState> {
  const member = await requireMember('upkeep')
  return answerForm(async () => {
    await layDemo({ member, clock })
    await endFirstRun({ member, clock })
    redirect('/floor')
  })
}
