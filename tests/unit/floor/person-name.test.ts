import { expect, it } from 'vitest'
import { splitName } from '@/lib/format/person-name'

it('keeps the first part of a name for narrow places', () => {
  expect(splitName('Maud Penhallow')).toEqual({ first: 'Maud', rest: 'Penhallow' })
  expect(splitName(' Ana  de la Cruz ')).toEqual({ first: 'Ana', rest: 'de la Cruz' })
  expect(splitName('Ines')).toEqual({ first: 'Ines', rest: '' })
})
