import { execFile } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { promisify } from 'node:util'
import { afterEach, beforeEach, expect, it } from 'vitest'

let folder: string
let file: string
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'kilnward-lock-'))
  file = join(folder, 'running.json')
})
afterEach(() => rmSync(folder, { recursive: true, force: true }))

/** This process, which lives, and a part of its command line. */
const holder = JSON.stringify({ pid: process.pid, port: 3001, program: 'node', children: {} })

/** Takes the lock in a process of its own and says what came of it; `meanwhile` runs there 150 ms later. */
async function takeLock(meanwhile = ''): Promise<string> {
  const script = `
    import { writeFileSync } from 'node:fs'
    import { takeLock } from './jobs/lock.mjs'
    const file = ${JSON.stringify(file)}
    setTimeout(() => { ${meanwhile} }, 150)
    const refusal = ({ port }) => 'port ' + port + ' has it'
    const lock = await takeLock(${JSON.stringify(folder)}, { port: 3000, refusal }).catch((error) => error.message)
    if (typeof lock !== 'string') lock.noteChild('web', 1)
    process.stdout.write(typeof lock === 'string' ? lock : 'taken')`
  return (await promisify(execFile)(process.execPath, ['--input-type=module', '-e', script])).stdout
}

it('is refused while a program that lives has it, and so is one that reads the file before it is filled', async () => {
  writeFileSync(file, holder)
  expect(await takeLock()).toBe('port 3001 has it')
  writeFileSync(file, '')
  expect(await takeLock(`writeFileSync(file, ${JSON.stringify(holder)})`)).toBe('port 3001 has it')
})

it('is taken where nobody has it, where the holder is gone, and where the file tells nobody for good', async () => {
  expect(await takeLock()).toBe('taken')
  expect(JSON.parse(readFileSync(file, 'utf8'))).toMatchObject({ port: 3000, children: { web: 1 } })
  // The process that took it has ended by now.
  expect(await takeLock()).toBe('taken')
  writeFileSync(file, '{"pid":')
  expect(await takeLock()).toBe('taken')
})
