import { loadQueue } from '@/lib/queries/queue'
import { memberRoute } from '@/lib/server/api'
import { sharedJson } from '@/lib/server/shared-json'

/** The floor as it stands. Polled; an unchanged queue answers 304. */
export const GET = memberRoute('see', async ({ request, clock }) => {
  const { etag, queue } = await loadQueue({ clock })
  const headers = { etag, 'cache-control': 'private, no-cache' }
  if (request.headers.get('if-none-match') === etag) return new Response(null, { status: 304, headers })
  return sharedJson(queue, headers)
})
