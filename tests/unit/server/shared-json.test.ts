import { expect, it } from 'vitest'
import { sharedJson } from '@/lib/server/shared-json'

it('writes a value once, and gives it to each who asks', async () => {
  let written = 0
  const value = { trees: [{ tag: 'T-118', title: 'Otter Gate, Tür' }], toJSON: () => ((written += 1), { trees: value.trees }) }
  const [first, second] = [sharedJson(value, { etag: '"1"' }), sharedJson(value, { etag: '"1"' })]
  expect(written).toBe(1)
  for (const answer of [first, second]) {
    expect(answer.headers.get('etag')).toBe('"1"')
    expect(answer.headers.get('content-type')).toBe('application/json')
    expect(await answer.json()).toEqual({ trees: value.trees })
  }
})

it('keeps one value’s body from another’s', async () => {
  sharedJson({ trees: [1] }, {})
  expect(await sharedJson({ trees: [] }, {}).json()).toEqual({ trees: [] })
})
