import { chmod, mkdir, readFile, rename, rm, writeFile } from 'node:fs/promises'
import { dirname, join } from 'node:path'
import { z } from 'zod'
import { env } from '@/lib/core/env'

const demoTokens = z.array(z.object({ sensorId: z.int(), name: z.string(), token: z.string() }))
export type DemoTokens = z.infer<typeof demoTokens>

const fileOf = () => join(env().DATA_DIR, 'demo-tokens.json')

/** Keeps the tokens of the demo's own sensors for the feed, readable by nobody else: the database holds only their digests. */
export async function keepDemoTokens(tokens: DemoTokens): Promise<void> {
  const file = fileOf()
  await mkdir(dirname(file), { recursive: true })
  await writeFile(`${file}.new`, `${JSON.stringify(tokens, null, 2)}\n`, { mode: 0o600 })
  await chmod(`${file}.new`, 0o600)
  await rename(`${file}.new`, file)
}

/** The kept tokens; null when the file is missing or makes no sense. */
export async function readDemoTokens(): Promise<DemoTokens | null> {
  try {
    return demoTokens.parse(JSON.parse(await readFile(fileOf(), 'utf8')))
  } catch {
    return null
  }
}

/** Throws the kept tokens away, after the demo has gone. */
export const dropDemoTokens = (): Promise<void> => rm(fileOf(), { force: true })
