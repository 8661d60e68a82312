import { execFileSync } from 'node:child_process'
import { createECDH, createPublicKey, randomBytes, verify, type ECDH } from 'node:crypto'
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import type { IncomingHttpHeaders, IncomingMessage, ServerResponse } from 'node:http'
import { createServer } from 'node:https'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import ece from 'http_ece'

/** How the service behaves towards one device. 'ok' is a service that works. */
export type PushMode = 'ok' | 'gone' | '404' | '403' | '429' | '500' | 'hang' | 'reset' | 'slow' | 'drip'

export type ReceivedPush = { text: string; headers: IncomingHttpHeaders; topic: string | null; ttlSeconds: number; at: number }

export type FakeDevice = {
  endpoint: string
  keys: { p256dh: string; auth: string }
  mode: PushMode
  /** Value of Retry-After in mode '429'. */
  retryAfter: string
  received: ReceivedPush[]
  /** Every request that came in, whatever became of it. */
  requests: number
}

type Kept = FakeDevice & { privateKey: ECDH; authSecret: Buffer; applicationServerKey: string }

export type FakePushService = {
  origin: string
  /** `host:port` for PUSH_EXTRA_HOSTS. */
  host: string
  /** Certificate file for PUSH_CA_FILE. */
  caFile: string
  subscribe: (applicationServerKey: string) => FakeDevice
  /** What a device that was off would still get: the last message of each topic. */
  undelivered: (device: FakeDevice) => ReceivedPush[]
  /** Why requests were refused, newest last. */
  refusals: string[]
  stop: () => Promise<void>
}

const RESERVED = /(^|[.@])(localhost|local|invalid|test)$/i

/**
 * A push service on the loopback that is as strict as the real ones: it checks the headers, the VAPID signature and its claims,
 * and decrypts what a browser would. A browser subscribes to its vendor's service only, so tests need one of their own.
 */
export async function startFakePushService(): Promise<FakePushService> {
  const folder = mkdtempSync(join(tmpdir(), 'kilnward-push-'))
  const [keyFile, caFile] = [join(folder, 'key.pem'), join(folder, 'cert.pem')]
  execFileSync(
    'openssl',
    `req -x509 -newkey ec -pkeyopt ec_paramgen_curve:P-256 -nodes -days 2 -subj /CN=push -addext subjectAltName=IP:127.0.0.1 -keyout ${keyFile} -out ${caFile}`.split(
      ' ',
    ),
    { stdio: 'ignore' },
  )
  const devices = new Map<string, Kept>()
  const refusals: string[] = []
  const server = createServer({ key: readFileSync(keyFile), cert: readFileSync(caFile) }, (request, response) => {
    answer(request, response).catch(() => response.destroy())
  })
  await new Promise<void>((resolve) => {
    server.listen(0, '127.0.0.1', resolve)
  })
  // oxlint-disable-next-line typescript/no-unsafe-type-assertion -- a server that listens on a port has one
  const { port } = server.address() as AddressInfo
  const host = `127.0.0.1:${port}`
  const origin = `https://${host}`

  async function answer(request: IncomingMessage, response: ServerResponse): Promise<void> {
    const device = devices.get(request.url ?? '')
    if (device) device.requests += 1
    const mode = device?.mode ?? 'ok'
    if (mode === 'hang') return
    if (mode === 'reset') return void request.socket.destroy()
    const chunks: Buffer[] = []
    for await (const chunk of request) chunks.push(chunk)
    if (mode === 'drip') {
      response.writeHead(201)
      const drops = setInterval(() => response.write('.'), 500)
      response.on('close', () => clearInterval(drops))
      return
    }
    if (mode === 'slow') await new Promise((resolve) => setTimeout(resolve, 1500))
    const [status, words] = judge(device, request.headers, Buffer.concat(chunks))
    if (status !== 201) refusals.push(`${status} ${words}`)
    response.writeHead(status, status === 429 ? { 'retry-after': device!.retryAfter } : status === 201 ? { location: `${origin}/m/1` } : {})
    response.end(words)
  }

  function judge(device: Kept | undefined, headers: IncomingHttpHeaders, body: Buffer): [number, string] {
    if (!device || device.mode === '404') return [404, 'no such subscription']
    if (device.mode === 'gone') return [410, 'gone']
    if (device.mode === '429') return [429, 'slow down']
    if (device.mode === '500') return [500, 'broken']
    if (device.mode === '403') return [403, 'BadJwtToken']
    if (body.length > 4096) return [413, 'too large']
    if (!/^\d+$/.test(String(headers['ttl'] ?? ''))) return [400, 'no TTL']
    if (headers['content-encoding'] !== 'aes128gcm') return [415, 'not aes128gcm']
    const topic = typeof headers['topic'] === 'string' ? headers['topic'] : null
    if (topic !== null && !/^[A-Za-z0-9_-]{1,32}$/.test(topic)) return [400, 'bad topic']
    if (!['very-low', 'low', 'normal', 'high'].includes(String(headers['urgency'] ?? 'normal'))) return [400, 'bad urgency']
    const refused = vapidRefusal(headers['authorization'] ?? '', device.applicationServerKey, origin)
    if (refused) return refused
    const text = ece.decrypt(body, { version: 'aes128gcm', privateKey: device.privateKey, authSecret: device.authSecret }).toString('utf8')
    device.received.push({ text, headers, topic, ttlSeconds: Number(headers['ttl']), at: Date.now() })
    return [201, '']
  }

  return {
    origin,
    host,
    caFile,
    refusals,
    subscribe: (applicationServerKey) => {
      const privateKey = createECDH('prime256v1')
      const p256dh = privateKey.generateKeys('base64url', 'uncompressed')
      const authSecret = randomBytes(16)
      const path = `/push/${randomBytes(12).toString('base64url')}`
      const device: Kept = {
        endpoint: `${origin}${path}`,
        keys: { p256dh, auth: authSecret.toString('base64url') },
        mode: 'ok',
        retryAfter: '120',
        received: [],
        requests: 0,
        privateKey,
        authSecret,
        applicationServerKey,
      }
      devices.set(path, device)
      return device
    },
    undelivered: (device) => {
      const newest = new Map<string, ReceivedPush>()
      for (const [index, push] of device.received.entries()) newest.set(push.topic ?? `no topic ${index}`, push)
      return [...newest.values()]
    },
    stop: async () => {
      server.closeAllConnections()
      await new Promise((resolve) => {
        server.close(resolve)
      })
      rmSync(folder, { recursive: true, force: true })
    },
  }
}

/** Why a VAPID header (RFC 8292) is refused; null when it is good. */
export function vapidRefusal(authorization: string, applicationServerKey: string, origin: string): [number, string] | null {
  const [, token = '', key] = /^vapid t=([\w-]+\.[\w-]+\.[\w-]+), ?k=([\w-]+)$/.exec(authorization) ?? []
  if (key === undefined) return [401, 'no vapid authorization']
  if (!isSigned(token, key)) return [403, 'bad signature']
  if (key !== applicationServerKey) return [403, 'another key than at subscribe']
  // oxlint-disable-next-line typescript/no-unsafe-type-assertion -- checked below
  const claims = JSON.parse(Buffer.from(token.split('.')[1]!, 'base64url').toString('utf8')) as Partial<Record<'aud' | 'sub', string>> & {
    exp?: number
  }
  const now = Date.now() / 1000
  if (claims.aud !== origin) return [403, 'wrong aud']
  if (typeof claims.exp !== 'number' || claims.exp <= now || claims.exp > now + 86_400) return [403, 'bad exp']
  const contact = claims.sub?.startsWith('mailto:') ? claims.sub.split('@')[1] : claims.sub && new URL(claims.sub).hostname
  return !contact || RESERVED.test(contact) ? [403, 'BadJwtToken'] : null
}

/** Whether an ES256 token is signed by this public key. */
export function isSigned(token: string, publicKey: string): boolean {
  const point = Buffer.from(publicKey, 'base64url')
  const [header, claims, signature] = token.split('.')
  const key = createPublicKey({
    format: 'jwk',
    key: { kty: 'EC', crv: 'P-256', x: point.subarray(1, 33).toString('base64url'), y: point.subarray(33, 65).toString('base64url') },
  })
  return verify('sha256', Buffer.from(`${header}.${claims}`), { key, dsaEncoding: 'ieee-p1363' }, Buffer.from(signature ?? '', 'base64url'))
}
