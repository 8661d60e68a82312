import { AppError } from '@/lib/core/errors'
import { loadUploadStatus } from '@/lib/queries/upload-status'
import { memberRoute } from '@/lib/server/api'

/** How far a file is read. */
export const GET = memberRoute<{ uploadId: string }>('sensors', async ({ params }) => {
  const status = await loadUploadStatus(params.uploadId)
  if (!status) throw new AppError('not_found', 'There is no such upload.')
  return Response.json(status)
})
