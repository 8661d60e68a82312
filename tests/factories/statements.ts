import { database } from '@/models'

/** The statements that a query sends, with their values in place: to ask the database for their plan. */
export async function statementsOf(run: () => Promise<unknown>): Promise<string[]> {
  const statements: string[] = []
  const before = database.options.logging
  database.options.logging = (text) => void statements.push(text.replace(/^Execut(?:ing|ed) \([^)]*\): /, ''))
  try {
    await run()
  } finally {
    database.options.logging = before
  }
  return statements
}
