'use server'

import { revalidatePath } from 'next/cache'
import { redirect } from 'next/navigation'
import { z } from 'zod'
import { answerSettings } from '@/app/(office)/settings/answer-settings'
import { cancelUpload } from '@/lib/commands/cancel-upload'
import { queueUpload } from '@/lib/commands/queue-upload'
import { systemClock as clock } from '@/lib/core/clock'
import { requireMember } from '@/lib/server/auth'
import type { FormState } from '@/lib/server/form-state'
import { fieldErrors } from '@/lib/trees/tree-form-values'
import { uploadSettings, type UploadSettings } from '@/lib/uploads/upload-settings'

const uploadIdInput = z.string().max(36)

/** Hands a file to the worker, to be read as `settings` say. */
export async function importUploadAction(uploadId: string, settings: UploadSettings): Promise<FormState> {
  const member = await requireMember('sensors')
  const parsed = uploadSettings.safeParse(settings)
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerSettings(async () => {
    await queueUpload(uploadIdInput.parse(uploadId), parsed.data, { member, clock })
    return 'The file is being read.'
  })
}

/** Stops a file that is being read. A draft is put away, and leaves nothing to look at. */
export async function cancelUploadAction(uploadId: string, isDraft: boolean): Promise<FormState> {
  const member = await requireMember('sensors')
  const answer = await answerSettings(async () => {
    await cancelUpload(uploadIdInput.parse(uploadId), { member, clock })
    return 'Stopped.'
  })
  if (answer.status !== 'done' || !isDraft) return answer
  revalidatePath('/room/upload')
  redirect('/room/upload')
}
