import { receiveUpload } from '@/lib/commands/receive-upload'
import { memberRoute } from '@/lib/server/api'
import { uploadQuery } from '@/lib/uploads/upload-contract'

/** A file of readings, written to the disk as it comes. */
export const POST = memberRoute(
  'sensors',
  async ({ request, member, clock }) => {
    const { sensorId, fileName } = uploadQuery.parse(Object.fromEntries(request.nextUrl.searchParams))
    const announcedBytes = Number(request.headers.get('content-length') ?? 0)
    const answer = await receiveUpload({ sensorId, fileName, body: request.body, announcedBytes }, { member, clock })
    return Response.json(answer, { status: 201 })
  },
  { bodyType: 'text/csv' },
)
