import { vi } from 'vitest'
import { database } from '@/models'

/** The statements that a query sends, each with the database's plan of it as JSON. */
export async function plansOf(run: () => Promise<unknown>): Promise<{ sql: string; plan: string }[]> {
  const sent = vi.spyOn(database, 'query')
  let calls: typeof sent.mock.calls
  try {
    await run()
  } finally {
    calls = [...sent.mock.calls]
    sent.mockRestore()
  }
  const plans: { sql: string; plan: string }[] = []
  for (const [sql, options] of calls) {
    if (typeof sql !== 'string') continue
    const [plan] = await database.query(`EXPLAIN QUERY PLAN ${sql}`, { replacements: options?.replacements })
    plans.push({ sql, plan: JSON.stringify(plan) })
  }
  return plans
}
