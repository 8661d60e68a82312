import { describe, expect, it } from 'vitest'
import { relativePath } from '@/lib/core/relative-path'

describe('relativePath', () => {
  it('keeps a path on this site', () => {
    expect(relativePath('/trees/T-118?from=floor#coats', '/floor')).toBe('/trees/T-118?from=floor#coats')
  })

  it.each([
    null,
    undefined,
    '',
    'trees',
    'https://evil.example/',
    '//evil.example',
    '/\\evil.example',
    '/\t/evil.example',
    'javascript:alert(1)',
  ])('drops %j', (value) => {
    expect(relativePath(value, '/floor')).toBe('/floor')
  })
})
