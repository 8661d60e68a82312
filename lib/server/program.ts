import { readFile } from 'node:fs/promises'
import { join } from 'node:path'
import { z } from 'zod'
import type { Clock } from '@/lib/core/clock'

/** Which program this is, and since when this process runs. */
export async function programFacts({ clock }: { clock: Clock }): Promise<{ version: string; build: string; openSince: number }> {
  const root = process.cwd()
  const { version } = z.object({ version: z.string() }).parse(JSON.parse(await readFile(join(root, 'package.json'), 'utf8')))
  // `next dev` has none.
  const build = await readFile(join(root, '.next/BUILD_ID'), 'utf8').catch(() => 'for work on it')
  return { version, build: build.trim(), openSince: clock.now() - Math.round(process.uptime() * 1000) }
}
