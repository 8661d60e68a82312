import { expect, it } from 'vitest'
import { readNumber } from '@/lib/uploads/read-number'

it.each([
  ['21.4', false, 21.4],
  [' 21,4 ', true, 21.4],
  ['-3.5', false, -3.5],
  ['−3,5', true, -3.5],
  ['+21', false, 21],
  ['.5', false, 0.5],
  ['2.14e1', false, 21.4],
  ['21.4°C', false, 21.4],
  ['70,5 °F', true, 70.5],
  ['52 %RH', false, 52],
  ['1,013.2', false, 1013.2],
  ['1.013,2 hPa', true, 1013.2],
  ['101 320', false, 101_320],
  ['21', true, 21],
] as const)('%s, decimal comma %s, is %s', (cell, hasComma, expected) => {
  expect(readNumber(cell, hasComma)).toBeCloseTo(expected, 9)
})

it.each(['', '  ', '--', 'n/a', 'NaN', 'OL', '***', 'null'])('%s is no value', (cell) => {
  expect(readNumber(cell, false)).toBeNull()
})

it.each([
  ['21,4', false],
  ['21.4', true],
  ['1,23', false],
  ['warm', false],
  ['12:30', false],
  ['0x10', false],
  ['Infinity', false],
  ['1-2', false],
] as const)('%s, decimal comma %s, is no number', (cell, hasComma) => {
  expect(readNumber(cell, hasComma)).toBeNaN()
})
