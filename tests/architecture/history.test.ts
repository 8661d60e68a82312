import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'

const root = join(import.meta.dirname, '../..')

const files = ['app', 'jobs', 'lib', 'models', 'db'].flatMap((folder) =>
  readdirSync(join(root, folder), { recursive: true, encoding: 'utf8' })
    .filter((name) => /\.(?:tsx?|mjs)$/.test(name))
    .map((name) => ({ file: `${folder}/${name}`, text: readFileSync(join(root, folder, name), 'utf8') })),
)

/** Ways to change or remove rows of the two tables, by model and by SQL. */
const CHANGES = [
  /\b(?:TreeEvent|FoundryEvent)\s*\.\s*(?:update|destroy|truncate|upsert|increment|decrement|bulkBuild|restore)\b/,
  /\b(?:TreeEvent|FoundryEvent)\.(?:create|bulkCreate)\([^;]*\b(?:updateOnDuplicate|ignoreDuplicates)\b/,
  /\b(?:TreeEvent|FoundryEvent)\s*\.\s*find\w+\([^;]*\)\s*\)?\s*\.\s*(?:update|destroy|save|set)\b/,
  /\b(?:UPDATE|DELETE\s+FROM|REPLACE\s+INTO|INSERT\s+OR\s+REPLACE\s+INTO|DROP\s+TABLE|ALTER\s+TABLE)\s+["`]?(?:tree_events|foundry_events)\b/i,
  // A name that is put into a statement from elsewhere.
  /(?<!tableName: |kindsIn\(|has\()['"](?:tree|foundry)_events['"]/,
  /DROP\s+TRIGGER\s+["`]?(?:tree|foundry)_events_no_/i,
]

/** Takes the demo's own rows away with what they are about; the triggers let nothing else go. */
const MAY_REMOVE_DEMO = 'lib/demo/remove-demo.ts'

describe('the history', () => {
  it('is changed and removed by no code, but for demo data', () => {
    const wrong = files
      .filter(({ file, text }) => file !== MAY_REMOVE_DEMO && CHANGES.some((change) => change.test(text)))
      .map(({ file }) => file)
    expect(wrong).toEqual([])
  })

  it.each([
    'await TreeEvent.update({ kind }, { where })',
    'await FoundryEvent.destroy({ where: {} })',
    "await database.query('DELETE FROM tree_events WHERE id = 1')",
    'update foundry_events set at = 1',
    "(await TreeEvent.findByPk(1)).update({ kind: 'x' })",
    'DROP TRIGGER foundry_events_no_update',
    "for (const table of ['holds', 'tree_events']) await run(`DELETE FROM ${table}`)",
  ])('would be seen to change by: %s', (code) => {
    expect(CHANGES.some((change) => change.test(code))).toBe(true)
  })
})
