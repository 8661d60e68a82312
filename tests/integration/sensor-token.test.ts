import { NextRequest } from 'next/server'
import { beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { issueSensorToken } from '@/lib/commands/issue-sensor-token'
import { revokeSensorToken } from '@/lib/commands/revoke-sensor-token'
import { sensorRoute } from '@/lib/server/api'
import { readJson } from '@/lib/server/read-json'
import { Sensor, SensorToken } from '@/models'
import { buildMember } from '@/tests/factories/shell-room'

const clock = { now: () => Date.UTC(2026, 10, 30, 6) }
const body = z.strictObject({ airTempC: z.number() })
const route = sensorRoute(async ({ request, sensor }) =>
  Response.json({ ...(await readJson(request, body, { maxBytes: 100 })), by: sensor.sensorName }),
)

let sensor: Sensor
let count = 0
// While nobody is a member every door says so instead.
beforeAll(() => buildMember('owner'))
beforeEach(async () => {
  count += 1
  sensor = await Sensor.create({ name: `Drying room ${count}`, kind: 'logger', createdAt: clock.now() })
})

const issue = () => issueSensorToken({ sensorId: sensor.id }, { member: null, clock })
function send(headers: Record<string, string>, text = '{"airTempC":21}'): Promise<Response> {
  const request = new NextRequest('http://kilnward.shop/api/v1/readings', {
    method: 'POST',
    headers: { 'content-type': 'application/json', 'content-length': String(text.length), ...headers },
    body: text,
  })
  return route(request, { params: Promise.resolve({}) })
}
const withToken = (token: string, text?: string) => send({ authorization: `Bearer ${token}` }, text)

describe('a sensor token', () => {
  it('speaks for its sensor, and only its digest is kept', async () => {
    const { id, token } = await issue()
    expect(token).toMatch(/^kw_[0-9a-f]{16}_[\w-]{43}$/)
    const response = await withToken(token)
    expect(response.status).toBe(200)
    expect(await response.json()).toEqual({ airTempC: 21, by: sensor.name })
    const row = await SensorToken.findByPk(id)
    expect(JSON.stringify(row)).not.toContain(token.split('_').slice(2).join('_'))
    expect(row?.lastUsedAt).toBeGreaterThan(Date.now() - 10_000)
  })

  it('is stamped at most once a minute', async () => {
    const { id, token } = await issue()
    const used = Date.now() - 30_000
    await SensorToken.update({ lastUsedAt: used }, { where: { id } })
    await withToken(token)
    expect((await SensorToken.findByPk(id))?.lastUsedAt).toBe(used)
    await SensorToken.update({ lastUsedAt: Date.now() - 60_000 }, { where: { id } })
    await withToken(token)
    expect((await SensorToken.findByPk(id))?.lastUsedAt).toBeGreaterThan(used)
  })

  it('is worth nothing once revoked, while a newer one of the same sensor is', async () => {
    const [old, fresh] = [await issue(), await issue()]
    await revokeSensorToken({ tokenId: old.id }, { member: null, clock })
    await revokeSensorToken({ tokenId: old.id }, { member: null, clock })
    expect((await withToken(old.token)).status).toBe(401)
    expect((await withToken(fresh.token)).status).toBe(200)
  })

  it('is worth nothing once the sensor is retired, and no new one is made then', async () => {
    const { token } = await issue()
    await sensor.update({ retiredAt: clock.now() })
    expect((await withToken(token)).status).toBe(401)
    await expect(issue()).rejects.toMatchObject({ code: 'conflict' })
  })

  it('is not made for a wall hygrometer or for no sensor', async () => {
    const wall = await Sensor.create({ name: `Wall ${count}`, kind: 'wall hygrometer', createdAt: clock.now() })
    await expect(issueSensorToken({ sensorId: wall.id }, { member: null, clock })).rejects.toMatchObject({ code: 'conflict' })
    await expect(issueSensorToken({ sensorId: 99_999 }, { member: null, clock })).rejects.toMatchObject({ code: 'not_found' })
    await expect(revokeSensorToken({ tokenId: 'no-such-token' }, { member: null, clock })).rejects.toMatchObject({ code: 'not_found' })
  })

  it('has to be right in every part', async () => {
    const { id, token } = await issue()
    const other = await issue()
    const [, , secret = ''] = /^(kw_[0-9a-f]{16})_(.+)$/.exec(token) ?? []
    const wrong = [
      '',
      'x',
      token.slice(0, -1),
      `${token}A`,
      `${token.slice(0, -1)}${token.endsWith('A') ? 'B' : 'A'}`,
      `kw_${other.id}_${secret}`,
      `kw_${'0'.repeat(16)}_${secret}`,
      `kw_${id.toUpperCase()}_${secret}`.replace(/kw_\d+_/, 'kw__'),
    ]
    for (const presented of wrong) {
      const response = await withToken(presented)
      expect(response.status, presented).toBe(401)
      expect(response.headers.get('www-authenticate')).toMatch(/^Bearer/)
      expect(await response.text()).not.toContain(secret)
    }
    expect((await send({ authorization: `Basic ${token}` })).status).toBe(401)
    expect((await send({ cookie: `next-auth.session-token=${token}` })).status).toBe(401)
  })

  it('may send 60 times a minute, and hears when to go on', async () => {
    const [busy, calm] = [await issue(), await issue()]
    for (let index = 0; index < 60; index += 1) expect((await withToken(busy.token)).status).toBe(200)
    const refused = await withToken(busy.token)
    expect(refused.status).toBe(429)
    expect(Number(refused.headers.get('retry-after'))).toBeGreaterThan(0)
    expect(Number(refused.headers.get('retry-after'))).toBeLessThanOrEqual(60)
    expect((await withToken(calm.token)).status).toBe(200)
  })
})

const refusal = async (text: string, headers: Record<string, string> = {}): Promise<unknown> => {
  const { token } = await issue()
  const response = await send({ authorization: `Bearer ${token}`, ...headers }, text)
  expect(response.headers.get('content-type')).toBe('application/problem+json')
  return response.json()
}

describe('a body', () => {
  it('must be JSON, and say so', async () => {
    expect(await refusal('{"airTempC":')).toMatchObject({ status: 400, detail: 'The body is not valid JSON.' })
    expect(await refusal('{}', { 'content-type': 'text/plain' })).toMatchObject({ status: 415 })
  })

  it('must fit, with and without a stated length', async () => {
    const long = JSON.stringify({ airTempC: 1, pad: 'x'.repeat(200) })
    expect(await refusal(long)).toMatchObject({ status: 413 })
    expect(await refusal(long, { 'content-length': '10' })).toMatchObject({ status: 413 })
  })

  it('must have the right fields, each named in the answer', async () => {
    expect(await refusal('{"airTempC":"warm","role":"owner"}')).toMatchObject({
      type: 'urn:kilnward:problem:invalid_input',
      status: 422,
      fields: [
        { path: 'airTempC', message: expect.any(String) },
        { path: '', message: expect.stringContaining('role') },
      ],
    })
  })
})
