import { gunzipSync } from 'node:zlib'
import { expect, it } from 'vitest'
import { sharedJson } from '@/lib/server/shared-json'

const asks = (encoding?: string) =>
  new Request('http://127.0.0.1/', encoding === undefined ? {} : { headers: { 'accept-encoding': encoding } })
const value = { trees: Array.from({ length: 50 }, (_, index) => ({ tag: `T-${index}`, title: 'Otter Gate, Tür' })) }

it('gives the same value packed and plain, by what is asked for', async () => {
  const packed = await sharedJson(value, asks('gzip, deflate, br'), { etag: '"1"' })
  const bytes = Buffer.from(await packed.arrayBuffer())
  expect(packed.headers.get('content-encoding')).toBe('gzip')
  expect(packed.headers.get('content-length')).toBe(String(bytes.length))
  expect(JSON.parse(gunzipSync(bytes).toString())).toEqual(value)
  const plain = await sharedJson(value, asks(), { etag: '"1"' })
  expect(plain.headers.get('content-encoding')).toBeNull()
  expect(await plain.json()).toEqual(value)
  for (const { headers } of [packed, plain]) {
    expect(headers.get('etag')).toBe('"1"')
    expect(headers.get('vary')).toBe('accept-encoding')
    expect(headers.get('content-type')).toBe('application/json')
  }
})

it('keeps one value’s body from another’s', async () => {
  await sharedJson(value, asks('gzip'), {})
  expect(await (await sharedJson({ trees: [] }, asks(), {})).json()).toEqual({ trees: [] })
})
