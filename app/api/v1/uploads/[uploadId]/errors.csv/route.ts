import { createReadStream } from 'node:fs'
import { Readable } from 'node:stream'
import { AppError } from '@/lib/core/errors'
import { loadUploadErrors } from '@/lib/queries/upload-status'
import { memberRoute } from '@/lib/server/api'

/** The rows of a file that could not be read, as a file. */
export const GET = memberRoute<{ uploadId: string }>('sensors', async ({ params }) => {
  const errors = await loadUploadErrors(params.uploadId)
  if (!errors) throw new AppError('not_found', 'There are no refused rows of such an upload, or they are not kept any more.')
  const name = errors.fileName.replace(/\.\w+$/, '').replaceAll(/[^\w.-]+/g, '-')
  // What lies behind the good part is of a piece that is being written.
  // oxlint-disable-next-line typescript/no-unsafe-type-assertion -- Node's own stream type and the browser's differ in name only
  const body = Readable.toWeb(createReadStream(errors.file, { end: errors.bytes - 1 })) as ReadableStream<Uint8Array>
  return new Response(body, {
    headers: {
      'content-type': 'text/csv; charset=utf-8; header=present',
      'content-disposition': `attachment; filename="${name}-not-read.csv"`,
    },
  })
})
