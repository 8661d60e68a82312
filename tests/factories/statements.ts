import { vi } from 'vitest'
import { database } from '@/models'

/** The statements that a query sends, with their values in place: to ask the database for their plan. */
export async function statementsOf(run: () => Promise<unknown>): Promise<string[]> {
  const statements: string[] = []
  const log = vi.spyOn(database, 'log').mockImplementation((...parts: unknown[]) => {
    statements.push(String(parts[0]).replace(/^Execut(?:ing|ed) \([^)]*\): /, ''))
  })
  try {
    await run()
  } finally {
    log.mockRestore()
  }
  return statements
}
