import { loadUploadPreview } from '@/lib/queries/upload-preview'
import { memberRoute } from '@/lib/server/api'
import { previewQuery } from '@/lib/uploads/upload-contract'

/** How a file would be read: as asked, or as it seems to be written. */
export const GET = memberRoute<{ uploadId: string }>('sensors', async ({ request, params, clock }) => {
  const { settings = null } = previewQuery.parse(Object.fromEntries(request.nextUrl.searchParams))
  return Response.json(await loadUploadPreview(params.uploadId, settings, { clock }))
})
