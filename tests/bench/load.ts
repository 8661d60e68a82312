import { Agent, request } from 'node:http'

export type Load = { url: string; headers: Record<string, string>; lanes?: number; milliseconds?: number; status: number }

/**
 * Asks one address again and again over lasting connections.
 *
 * @returns answers per second.
 * @throws {Error} on any other status than the one expected: a fast refusal is no speed.
 */
export async function rate({ url, headers, lanes = 8, milliseconds = 4000, status }: Load): Promise<number> {
  const agent = new Agent({ keepAlive: true, maxSockets: lanes })
  const began = performance.now()
  let answers = 0
  const lane = async () => {
    while (performance.now() - began < milliseconds) {
      const answer = await ask(url, headers, { agent })
      if (answer.status !== status) throw new Error(`${url} answered ${answer.status}.`)
      answers += 1
    }
  }
  await Promise.all(Array.from({ length: lanes }, lane))
  const seconds = (performance.now() - began) / 1000
  agent.destroy()
  return answers / seconds
}

export type Answer = { status: number; etag: string; bytes: number; milliseconds: number }

/** One request, read to its end; a JSON body makes it a POST. */
export function ask(url: string, headers: Record<string, string>, { agent, body }: { agent?: Agent; body?: string } = {}): Promise<Answer> {
  return new Promise((resolve, reject) => {
    const began = performance.now()
    const posted = body === undefined ? {} : { method: 'POST', headers: { ...headers, 'content-type': 'application/json' } }
    request(url, { headers, ...(agent && { agent }), ...posted }, (response) => {
      let bytes = 0
      response.on('data', (chunk: Buffer) => (bytes += chunk.length))
      response.on('error', reject)
      response.on('end', () => {
        const { statusCode = 0, headers: answered } = response
        resolve({ status: statusCode, etag: answered.etag ?? '', bytes, milliseconds: performance.now() - began })
      })
    })
      .on('error', reject)
      .end(body)
  })
}

export const median = (values: readonly number[]): number => values.toSorted((one, other) => one - other)[values.length >> 1]!
