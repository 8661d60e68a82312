import { DEFAULT_LAST_MOISTURE_TARGET, defaultReferenceHours } from '@/lib/drying/recipe-defaults'
import { formatShare, formatTemperature, type TempUnit } from '@/lib/format/units'
import { shortNumber } from '@/lib/recipes/coat-cells'

/** The air in which a need is counted, in words: '21.0 °C, 50 % and 1 m/s'. */
export const referenceAirWords = (temp: TempUnit): string => `${formatTemperature(21, temp)}, 50\u00A0% and 1\u00A0m/s`

const start = (...coat: Parameters<typeof defaultReferenceHours>) => shortNumber(defaultReferenceHours(...coat))

/** Our starting values for a need: 'face 2.5, then 3; backup 4, 4.16, 4.33 and so on; core fill 10; seal 12, to 5 %'. */
export function startingNeedsWords(): string {
  return [
    `face ${start('face', 0)}, then ${start('face', 1)}`,
    `backup ${[0, 1, 2].map((index) => start('backup', index)).join(', ')} and so on`,
    `core fill ${start('core fill', 0)}`,
    `seal ${start('seal', 0)}, to ${formatShare(DEFAULT_LAST_MOISTURE_TARGET)}`,
  ].join('; ')
}
