import { describe, expect, it } from 'vitest'
import { warningText } from '@/lib/queue/warning-text'

describe('the sentence of a warning', () => {
  it('has its temperatures in the unit of the reader, where it has any', () => {
    const hot = { text: 'The room is at 29.0 °C.', textInDegF: 'The room is at 84.2 °F.' }
    expect(warningText(hot, 'degC')).toBe(hot.text)
    expect(warningText(hot, 'degF')).toBe(hot.textInDegF)
    expect(warningText({ text: 'Held by Ines: crack.' }, 'degF')).toBe('Held by Ines: crack.')
  })
})
