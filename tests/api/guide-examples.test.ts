import { execFile, spawn } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { promisify } from 'node:util'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { curlManyReadings, curlOneReading, pythonLoop, shellLoop, TOKEN_LINE } from '@/lib/room/sending-examples'
import { seedMember, startServer, type TestServer } from '@/tests/setup/server'

const run = promisify(execFile)

let server: TestServer
let token: string
let folder: string

beforeAll(async () => {
  server = await startServer()
  folder = mkdtempSync(join(tmpdir(), 'kilnward-guide-'))
  const { buildFoundry } = await import('@/tests/factories/shell-room')
  const { issueSensorToken } = await import('@/lib/commands/issue-sensor-token')
  const foundry = await buildFoundry()
  const member = await seedMember('owner')
  ;({ token } = await issueSensorToken({ sensorId: foundry.sensorId }, { member, clock: { now: () => Date.now() } }))
})
beforeEach(async () => {
  const { Reading } = await import('@/models')
  await Reading.destroy({ where: {} })
})
afterAll(async () => {
  await server.stop()
  rmSync(folder, { recursive: true, force: true })
})

const readings = async () => {
  const { Reading } = await import('@/models')
  return (await Reading.findAll({ order: ['measuredAt'] })).map(({ airTempC, measuredAt }) => ({ airTempC, age: Date.now() - measuredAt }))
}
const withToken = (code: string) => code.replaceAll('kw_…', token)
const shell = async (code: string) => (await run('sh', ['-c', withToken(code)], { cwd: folder })).stdout

/** Starts an example that never ends, and stops it when it has written an answer. */
function untilAnswer(command: string, args: string[]): Promise<string> {
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, { cwd: folder, detached: true })
    let text = ''
    let isAnswered = false
    const end = () => {
      if (child.pid) process.kill(-child.pid, 'SIGKILL')
    }
    const timer = setTimeout(() => {
      end()
      reject(new Error(`No answer: ${text}`))
    }, 30_000)
    child.on('error', reject)
    for (const stream of [child.stdout, child.stderr]) {
      stream.on('data', (chunk: Buffer) => {
        text += chunk.toString()
        if (isAnswered || !/accepted|not sent|curl:/.test(text)) return
        isAnswered = true
        clearTimeout(timer)
        // The shell empties its file after the answer.
        setTimeout(() => {
          end()
          resolve(text)
        }, 500)
      })
    }
  })
}

describe('the examples of the guide, as they stand there', () => {
  it('one reading', async () => {
    expect(JSON.parse(await shell(`${TOKEN_LINE}\n${curlOneReading(server.baseUrl)}`))).toMatchObject({
      accepted: 1,
      repeated: 0,
      rejected: [],
    })
    const [reading] = await readings()
    expect(reading?.airTempC).toBe(21.4)
    expect(Math.abs(reading?.age ?? 1e9)).toBeLessThan(60_000)
  })

  it('three readings', async () => {
    expect(JSON.parse(await shell(`${TOKEN_LINE}\n${curlManyReadings(server.baseUrl)}`))).toMatchObject({
      accepted: 3,
      repeated: 0,
      rejected: [],
    })
    expect((await readings()).map(({ airTempC }) => airTempC)).toEqual([21.2, 21.3, 21.4])
  })

  // Port 9 answers nobody.
  const away = (code: string) => code.replaceAll(server.baseUrl, 'http://127.0.0.1:9')

  it('the loop in the shell keeps what it could not send, and sends it with the next reading', async () => {
    const code = withToken(shellLoop(server.baseUrl))
    expect(await untilAnswer('sh', ['-c', away(code)])).toContain('curl:')
    expect(await readings()).toEqual([])
    // Its clock counts whole seconds, and two readings of one second are one.
    await sleep(1100)
    expect(await untilAnswer('sh', ['-c', code])).toContain('"accepted":2')
    expect(await readings()).toHaveLength(2)
  })

  it('the loop in Python says that it could not send, and sends when it can', async () => {
    const code = withToken(pythonLoop(server.baseUrl))
    expect(await untilAnswer('python3', ['-u', '-c', away(code)])).toContain('not sent:')
    expect(await untilAnswer('python3', ['-u', '-c', code])).toContain("'accepted': 1")
    expect(await readings()).toHaveLength(1)
  })
})
