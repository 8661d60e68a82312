'use server'

import { revalidatePath } from 'next/cache'
import { redirect } from 'next/navigation'
import { systemClock as clock } from '@/lib/core/clock'
import { layDemo } from '@/lib/demo/lay-demo'
import { removeDemo } from '@/lib/demo/remove-demo'
import { keptWords, laidWords } from '@/lib/foundry/demo-words'
import { requireMember } from '@/lib/server/auth'
import { answerForm, type FormState } from '@/lib/server/form-state'

/** Lays the demo data over a floor without trees. */
export async function layDemoAction(): Promise<FormState> {
  const member = await requireMember('upkeep')
  return answerForm(async () => {
    const laid = await layDemo({ member, clock })
    revalidatePath('/', 'layout')
    return { status: 'done', text: laidWords(laid) }
  })
}

/** Removes it. A foundry that is the demo itself is empty then, and the first run begins. */
export async function removeDemoAction(): Promise<FormState> {
  const member = await requireMember('upkeep')
  return answerForm(async () => {
    const { treeCount, kept, isEmptied } = await removeDemo({ member, clock })
    if (isEmptied) redirect('/first-run')
    revalidatePath('/', 'layout')
    return { status: 'done', text: `${treeCount} trees and all that belongs to the demo are gone. ${keptWords(kept)}`.trim() }
  })
}
