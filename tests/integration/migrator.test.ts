import { mkdtempSync, rmSync } from 'node:fs'
import { readdir } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, describe, expect, it } from 'vitest'
import { QueryTypes } from 'sequelize'
import { openDatabase } from '@/db/connection'
import { migrate } from '@/db/migrator'

const directory = mkdtempSync(join(tmpdir(), 'kilnward-migrator-'))
afterAll(() => rmSync(directory, { recursive: true, force: true }))

const shipped = (await readdir('db/migrations')).filter((name) => name.endsWith('.sql')).toSorted()

describe('migrate', () => {
  it('applies every migration to a fresh file, and nothing the second time', async () => {
    const file = join(directory, 'fresh.sqlite')
    expect(await migrate(file)).toEqual(shipped)
    expect(await migrate(file)).toEqual([])
    const database = openDatabase(file)
    expect(await database.query('SELECT name FROM migrations', { type: QueryTypes.SELECT })).toEqual(shipped.map((name) => ({ name })))
    expect(await database.query('PRAGMA journal_mode', { type: QueryTypes.SELECT })).toEqual([{ journal_mode: 'wal' }])
    await database.close()
  })

  it('refuses a file of a newer program and names what it does not know', async () => {
    const file = join(directory, 'newer.sqlite')
    await migrate(file)
    const database = openDatabase(file)
    await database.query("INSERT INTO migrations (name) VALUES ('9999-kiln-on-the-moon.sql')")
    await database.close()
    await expect(migrate(file)).rejects.toThrow('9999-kiln-on-the-moon.sql')
  })
})
