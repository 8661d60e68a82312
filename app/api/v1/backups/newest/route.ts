import { createReadStream } from 'node:fs'
import { join } from 'node:path'
import { Readable } from 'node:stream'
import { backupDir } from '@/lib/core/env'
import { AppError } from '@/lib/core/errors'
import { log } from '@/lib/core/log'
import { newestBackupFile } from '@/lib/queries/backup-list'
import { memberRoute } from '@/lib/server/api'
import { sizeOf } from '@/lib/server/disk'

/** The newest backup as a file, in pieces: it may be larger than this program's memory. */
export const GET = memberRoute('upkeep', async ({ member }) => {
  const fileName = await newestBackupFile()
  const size = fileName === null ? 0 : await sizeOf(join(backupDir(), fileName))
  if (fileName === null || size === 0) throw new AppError('not_found', 'There is no backup yet.')
  log('backup.downloaded', { memberId: member.id, fileName })
  // oxlint-disable-next-line typescript/no-unsafe-type-assertion -- Node's own stream type and the browser's differ in name only
  const body = Readable.toWeb(createReadStream(join(backupDir(), fileName))) as ReadableStream<Uint8Array>
  return new Response(body, {
    headers: {
      'content-type': 'application/vnd.sqlite3',
      'content-length': String(size),
      'content-disposition': `attachment; filename="${fileName}"`,
    },
  })
})
