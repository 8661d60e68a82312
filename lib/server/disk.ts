import { createHash } from 'node:crypto'
import { createReadStream } from 'node:fs'
import { open, readdir, readlink, realpath, stat, statfs } from 'node:fs/promises'
import { pipeline } from 'node:stream/promises'
import { databaseFile } from '@/db/connection'

/** Size of a file in bytes; 0 where there is none. */
export async function sizeOf(file: string): Promise<number> {
  return stat(file).then(
    ({ size }) => size,
    () => 0,
  )
}

/** Bytes that the disk of a folder still takes from this program. */
export async function freeBytesOf(folder: string): Promise<number> {
  const { bavail, bsize } = await statfs(folder)
  return bavail * bsize
}

/** Whether two folders lie on the same disk, and one of them is lost with the other. */
export async function isSameDisk(one: string, other: string): Promise<boolean> {
  const [first, second] = await Promise.all([stat(one), stat(other)])
  return first.dev === second.dev
}

/** SHA-256 of a file in hex, read in pieces. */
export async function sha256OfFile(file: string): Promise<string> {
  const hash = createHash('sha256')
  await pipeline(createReadStream(file), hash)
  return hash.digest('hex')
}

/** Waits until a file, or the names in a folder, would survive a power cut. */
export async function syncToDisk(path: string): Promise<void> {
  const handle = await open(path, 'r')
  try {
    await handle.sync()
  } finally {
    await handle.close()
  }
}

/** Other processes that have a file open, where the system tells (Linux). Empty elsewhere. */
export async function processesWithOpen(file: string): Promise<number[]> {
  const path = await realpath(file).catch(() => null)
  const pids = path === null ? [] : await readdir('/proc').catch(() => [])
  const holders: number[] = []
  for (const pid of pids.filter((name) => /^\d+$/.test(name) && Number(name) !== process.pid)) {
    // Another user's, or gone by now.
    const descriptors = await readdir(`/proc/${pid}/fd`).catch(() => [])
    const targets = await Promise.all(descriptors.map((fd) => readlink(`/proc/${pid}/fd/${fd}`).catch(() => '')))
    if (targets.includes(path ?? '')) holders.push(Number(pid))
  }
  return holders
}

/** Sizes of the database file and of its write-ahead log. */
export async function recordSizes(): Promise<{ sizeBytes: number; walBytes: number }> {
  const file = databaseFile()
  const [sizeBytes, walBytes] = await Promise.all([sizeOf(file), sizeOf(`${file}-wal`)])
  return { sizeBytes, walBytes }
}
