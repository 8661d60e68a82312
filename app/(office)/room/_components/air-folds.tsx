import { TimeFoot, type Frame } from '@/app/(office)/room/_components/chart-frame'
import { CoatBars } from '@/app/(office)/room/_components/coat-bars'
import { FigureChart } from '@/app/(office)/room/_components/figure-chart'
import { Fold } from '@/app/(office)/room/_components/fold'
import { formatMoment } from '@/lib/format/local-time'
import { formatKelvin, formatTemperature, fromSi, oneDecimal, UNIT_SIGNS, wholeNumber, type TempUnit } from '@/lib/format/units'
import type { QueueRoom } from '@/lib/queue/contract'
import { PULL_WORDS } from '@/lib/room/drying-pull'
import type { RoomPage } from '@/lib/room/room-contract'
import type { Figure } from '@/lib/room/series'

function scaled(figure: Figure | null, to: (value: number) => number): Figure | null {
  return figure && { likely: to(figure.likely), low: to(figure.low), high: to(figure.high) }
}

/** The room's air over the drawn time: temperature and humidity with the coats in progress, then the pull of it. */
export function AirFolds({ page, room, frame, tempUnit }: { page: RoomPage; room: QueueRoom; frame: Frame; tempUnit: TempUnit }) {
  const { points, band, bars, now } = page
  const isF = tempUnit === 'degF'
  const asShown = (figure: Figure | null) => scaled(figure, (celsius) => fromSi(celsius, tempUnit))
  const gapAsShown = (figure: Figure | null) => scaled(figure, (kelvin) => (isF ? kelvin * 1.8 : kelvin))
  const newest = points.findLast((point) => point.kind !== 'forecast' && point.airTempC !== null)
  const staleWords = room.isStale && room.measuredAt !== null ? [`read ${formatMoment(room.measuredAt, now, frame.timeZone)}`] : []
  const lowest = points
    .filter((point) => point.kind === 'forecast' && point.wetBulbGapK !== null)
    .toSorted((a, b) => a.wetBulbGapK!.likely - b.wetBulbGapK!.likely)[0]
  const tempBand = { low: fromSi(band.lowTempC, tempUnit), high: fromSi(band.highTempC, tempUnit) }
  const sign = UNIT_SIGNS[tempUnit]
  const kelvinSign = isF ? sign : 'K'
  return (
    <>
      <Fold
        title="Temperature and humidity"
        line={
          room.airTempC === null
            ? 'not read yet'
            : `${formatTemperature(room.airTempC, tempUnit)}, ${wholeNumber(room.relHumidityPct ?? 0)} % RH`
        }
        isOpen
      >
        <FigureChart
          frame={frame}
          points={points}
          name="Temperature"
          valueOf={(point) => asShown(point.airTempC)}
          band={tempBand}
          step={isF ? 5 : 2}
          value={room.airTempC === null ? '–' : oneDecimal(fromSi(room.airTempC, tempUnit))}
          unit={sign}
          notes={[`band ${wholeNumber(tempBand.low)} to ${wholeNumber(tempBand.high)}`, ...staleWords]}
          tone="wax"
          format={oneDecimal}
          hasEnds
        />
        <FigureChart
          frame={frame}
          points={points}
          name="Humidity"
          valueOf={(point) => point.relHumidityPct}
          band={{ low: band.lowRhPct, high: band.highRhPct }}
          step={10}
          value={room.relHumidityPct === null ? '–' : wholeNumber(room.relHumidityPct)}
          unit="% RH"
          notes={[`band ${wholeNumber(band.lowRhPct)} to ${wholeNumber(band.highRhPct)}`, ...staleWords]}
          tone="wet"
          format={wholeNumber}
          hasEnds
        />
        {frame.range === '48h' && <CoatBars frame={frame} bars={bars} />}
        <div className="figure-chart">
          <TimeFoot frame={frame} />
        </div>
      </Fold>
      <Fold
        title="Drying pull"
        line={
          room.wetBulbGapK === null
            ? 'not known'
            : `${PULL_WORDS[room.pull]}: ${formatKelvin(room.wetBulbGapK, tempUnit)} now${lowest ? `, ${formatKelvin(lowest.wetBulbGapK!.likely, tempUnit)} at ${formatMoment(lowest.at, now, frame.timeZone)}` : ''}; recipe room ${formatKelvin(6.4, tempUnit)}`
        }
      >
        <FigureChart
          frame={frame}
          points={points}
          name="Drying pull"
          valueOf={(point) => gapAsShown(point.wetBulbGapK)}
          band={null}
          step={isF ? 4 : 2}
          value={room.wetBulbGapK === null ? '–' : oneDecimal(isF ? room.wetBulbGapK * 1.8 : room.wetBulbGapK)}
          unit={kelvinSign}
          notes={[
            'air less wet bulb',
            ...(newest?.dewPointC !== null && newest?.dewPointC !== undefined && newest.vaporPressureDeficitPa !== null
              ? [
                  `dew point ${formatTemperature(newest.dewPointC, tempUnit)}`,
                  `vapour-pressure deficit ${oneDecimal(newest.vaporPressureDeficitPa / 100)}\u00A0hPa`,
                ]
              : []),
          ]}
          tone="ink"
          format={oneDecimal}
        />
        <FigureChart
          frame={frame}
          points={points}
          name="Drying speed"
          valueOf={(point) => scaled(point.speed, (share) => share * 100)}
          band={null}
          step={20}
          value={room.speedPct === null ? '–' : wholeNumber(room.speedPct)}
          unit="%"
          notes={['of recipe speed, in air of 1.0\u00A0m/s', ...staleWords]}
          tone="wet"
          format={(value) => `${wholeNumber(value)} %`}
        />
        <div className="figure-chart">
          <TimeFoot frame={frame} />
        </div>
      </Fold>
    </>
  )
}
