import { Plate } from '@/app/_components/plate'
import { stationPressurePa } from '@/lib/drying/air'
import { formatPercent, formatTemperature, UNIT_SIGNS, type TempUnit } from '@/lib/format/units'
import type { FoundryInput } from '@/lib/foundry/foundry-input'

/** The foundry's settings for those who may not change them. */
export function FoundryFacts({ foundry, unit }: { foundry: FoundryInput; unit: TempUnit }) {
  const rows: [string, string][] = [
    ['Name', foundry.name],
    ['Time zone', foundry.timeZone],
    ['Altitude', `${foundry.altitudeM} m, about ${Math.round(stationPressurePa(foundry.altitudeM) / 100)} hPa`],
    ['Units', [UNIT_SIGNS[foundry.tempUnit], UNIT_SIGNS[foundry.massUnit], UNIT_SIGNS[foundry.lengthUnit]].join(', ')],
    ['Recipes made for', `${formatTemperature(foundry.bandLowTempC, unit)} to ${formatTemperature(foundry.bandHighTempC, unit)}`],
    ['', `${formatPercent(foundry.bandLowRhPct)} to ${formatPercent(foundry.bandHighRhPct)} humidity`],
  ]
  return (
    <Plate title="The foundry" line="an owner can change it">
      <dl className="facts">
        {rows.map(([word, value]) => (
          <div key={word}>
            <dt>{word}</dt>
            <dd>{value}</dd>
          </div>
        ))}
      </dl>
    </Plate>
  )
}
