import { createHash } from 'node:crypto'
import { createWriteStream } from 'node:fs'
import { mkdir, open, readdir, rm, stat } from 'node:fs/promises'
import { join } from 'node:path'
import { Readable } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import { dataDir } from '@/lib/core/env'
import { AppError } from '@/lib/core/errors'
import { formatBytes } from '@/lib/format/bytes'
import { freeBytesOf } from '@/lib/server/disk'

/** What the records and everything else still need after a file was taken in. */
const KEPT_FREE_BYTES = 256 * 1024 * 1024
const NAME = /^([0-9a-f-]{36})\.(rows|errors)$/

const uploadsDir = (): string => join(dataDir(), 'uploads')
/** Where the file of an upload lies. */
export const rowsFile = (uploadId: string): string => join(uploadsDir(), `${uploadId}.rows`)
/** Where its refused rows lie, as CSV. */
export const errorsFile = (uploadId: string): string => join(uploadsDir(), `${uploadId}.errors`)

/**
 * Writes a body to the disk as it comes, never the whole of it in memory, and waits until it would survive a power cut.
 *
 * @param announcedBytes by its Content-Length; 0 where it names none.
 * @throws {AppError} too_large, unavailable when the disk has no room, unprocessable for an empty file; malformed when the sender has gone.
 */
export async function keepBody(
  body: ReadableStream<Uint8Array> | null,
  { uploadId, announcedBytes, largestBytes }: { uploadId: string; announcedBytes: number; largestBytes: number },
): Promise<{ sizeBytes: number; sha256: string }> {
  const tooLarge = () =>
    new AppError('too_large', `The file is larger than ${formatBytes(largestBytes)}. Split it by years and send the parts.`)
  if (announcedBytes > largestBytes) throw tooLarge()
  await mkdir(uploadsDir(), { recursive: true, mode: 0o700 })
  // A sender that names no length may send as much as is taken at all.
  const expectedBytes = announcedBytes > 0 ? announcedBytes : largestBytes
  if ((await freeBytesOf(uploadsDir())) < expectedBytes + KEPT_FREE_BYTES) {
    throw new AppError(
      'unavailable',
      'The disk of the server has no room for this file. Nothing was saved. Free some space, then try again.',
      {
        retryAfterSeconds: 30,
      },
    )
  }
  const hash = createHash('sha256')
  let sizeBytes = 0
  const file = rowsFile(uploadId)
  try {
    await pipeline(
      Readable.from(body ?? []),
      async function* (chunks: AsyncIterable<Uint8Array>) {
        for await (const chunk of chunks) {
          sizeBytes += chunk.byteLength
          if (sizeBytes > largestBytes) throw tooLarge()
          hash.update(chunk)
          yield chunk
        }
      },
      createWriteStream(file, { flags: 'wx', mode: 0o600, flush: true }),
    )
    if (sizeBytes === 0) throw new AppError('unprocessable', 'The file is empty.')
    return { sizeBytes, sha256: hash.digest('hex') }
  } catch (error) {
    await rm(file, { force: true })
    throw error instanceof AppError ? error : refusalOf(error)
  }
}

function refusalOf(error: unknown): unknown {
  const code = error instanceof Error && 'code' in error ? String(error.code) : ''
  if (code === 'ENOSPC') {
    return new AppError('unavailable', 'The disk of the server is full. Nothing was saved. Free some space, then try again.')
  }
  const isGone = error instanceof Error && (error.name === 'AbortError' || error.name === 'ResponseAborted')
  if (isGone || code === 'ECONNRESET') return new AppError('malformed', 'The file did not come through to its end.')
  return error
}

/** Takes away the file of an upload; its refused rows stay. */
export async function removeRows(uploadId: string): Promise<void> {
  await rm(rowsFile(uploadId), { force: true })
}

export type StoredFile = { uploadId: string; kind: 'rows' | 'errors'; writtenAt: number }

/** What lies on the disk for uploads. */
export async function storedFiles(): Promise<StoredFile[]> {
  const names = await readdir(uploadsDir()).catch(() => [])
  const found = await Promise.all(
    names.map(async (name): Promise<StoredFile[]> => {
      const [, uploadId, kind] = NAME.exec(name) ?? []
      const writtenAt = await stat(join(uploadsDir(), name)).then(
        ({ mtimeMs }) => mtimeMs,
        () => null,
      )
      return uploadId === undefined || writtenAt === null ? [] : [{ uploadId, kind: kind === 'rows' ? 'rows' : 'errors', writtenAt }]
    }),
  )
  return found.flat()
}

/** Takes one of them away. */
export async function removeStoredFile({ uploadId, kind }: Pick<StoredFile, 'uploadId' | 'kind'>): Promise<void> {
  await rm(kind === 'rows' ? rowsFile(uploadId) : errorsFile(uploadId), { force: true })
}

export type ErrorsWriter = {
  /** Writes text at a place of the file; what lay there was of a chunk that was not finished. */
  write: (text: string, at: number) => Promise<number>
  close: () => Promise<void>
}

/** Opens the file of refused rows, cut off where its good part ends. @param goodBytes as the row of the upload says. */
export async function openErrors(uploadId: string, goodBytes: number): Promise<ErrorsWriter> {
  const handle = await open(errorsFile(uploadId), goodBytes === 0 ? 'w' : 'r+', 0o600)
  await handle.truncate(goodBytes)
  return {
    write: async (text, at) => {
      const { bytesWritten } = await handle.write(text, at, 'utf8')
      return bytesWritten
    },
    close: () => handle.close(),
  }
}
