'use server'

import { revalidatePath } from 'next/cache'
import { z } from 'zod'
import { holdTree, liftHold } from '@/lib/commands/hold-tree'
import { lookOver } from '@/lib/commands/look-over'
import { moveTree } from '@/lib/commands/move-tree'
import { passIntake } from '@/lib/commands/pass-intake'
import { refuseField } from '@/lib/commands/refuse-field'
import { scrapTree } from '@/lib/commands/scrap-tree'
import { systemClock } from '@/lib/core/clock'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { requireMember, type Member } from '@/lib/server/auth'
import { answerForm, type FormState } from '@/lib/server/form-state'
import { moveForm, readMoveForm } from '@/lib/trees/move-form'
import { fieldErrors } from '@/lib/trees/tree-form-values'
import { intakeInput, reasonInput } from '@/lib/trees/tree-input'

const treeIdInput = z.uuid()

/** Parses, runs one command, and reads every office page anew: a hold shows on the tree, in the list and on Burnout. */
async function treeForm<Input>(
  treeId: string,
  parsed: z.ZodSafeParseResult<Input>,
  run: (treeId: string, input: Input) => Promise<string>,
): Promise<FormState> {
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerForm(async () => {
    const text = await run(treeIdInput.parse(treeId), parsed.data)
    revalidatePath('/', 'layout')
    return { status: 'done', text }
  })
}

const by = (member: Member) => ({ member, clock: systemClock })
const reasonForm = z.object({ reason: reasonInput })
const readReason = (form: FormData) => reasonForm.safeParse({ reason: form.get('reason') ?? '' })

export async function holdAction(treeId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('hold')
  return treeForm(treeId, readReason(form), async (id, { reason }) => {
    await holdTree(id, reason, by(member))
    return 'Held.'
  })
}

export async function liftHoldAction(treeId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('lift hold')
  return treeForm(treeId, readReason(form), async (id, { reason }) => {
    await liftHold(id, reason, by(member))
    return 'Hold lifted.'
  })
}

export async function scrapAction(treeId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('trees')
  return treeForm(treeId, readReason(form), async (id, { reason }) => {
    await scrapTree(id, reason, by(member))
    return 'Scrapped.'
  })
}

export async function moveAction(treeId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('move')
  const { timeZone } = await loadFoundry()
  const parsed = moveForm(systemClock.now(), timeZone).safeParse(readMoveForm(form))
  return treeForm(treeId, parsed, async (id, { placeId, movedAt }) => {
    if (!(await moveTree(id, placeId, by(member), movedAt))) refuseField('placeId', 'It hangs there already, and did then.')
    return 'Moved.'
  })
}

export async function lookOverAction(treeId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('look over')
  const parsed = z
    .object({ note: z.string().trim().max(300, 'A note has at most 300 letters.') })
    .safeParse({ note: form.get('note') ?? '' })
  return treeForm(treeId, parsed, async (id, { note }) => {
    await lookOver(id, note, by(member))
    return 'Looked over.'
  })
}

export async function intakeAction(treeId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('intake')
  const isTicked = (name: string) => form.get(name) === 'on'
  const parsed = intakeInput.safeParse({
    waxSurface: form.get('waxSurface'),
    isWaxAtRoomTemp: isTicked('isWaxAtRoomTemp'),
    isCupFirm: isTicked('isCupFirm'),
    areVentsAndCorePinsIn: isTicked('areVentsAndCorePinsIn'),
  })
  return treeForm(treeId, parsed, async (id, intake) => {
    const isPassed = await passIntake(id, intake, by(member))
    return isPassed ? 'Intake passed.' : 'Kept. Intake stays open until every line is ticked.'
  })
}
