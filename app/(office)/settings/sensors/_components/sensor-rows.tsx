'use client'

import { AddPlate } from '@/app/(office)/settings/_components/add-plate'
import { ActForm } from '@/app/(office)/settings/_components/act-form'
import { RetiredFold } from '@/app/(office)/settings/_components/retired-fold'
import { RowPlate } from '@/app/(office)/settings/_components/row-plate'
import { NewToken } from '@/app/(office)/settings/sensors/_components/new-token'
import { SensorForm } from '@/app/(office)/settings/sensors/_components/sensor-form'
import { retireSensorAction, reuseSensorAction, revokeTokenAction } from '@/app/(office)/settings/sensors/actions'
import { formatReadAge } from '@/lib/format/duration'
import { formatMoment } from '@/lib/format/local-time'
import { nameList } from '@/lib/format/name-list'
import { formatPercent, formatTemperature, type Units } from '@/lib/format/units'
import type { SensorRow, TokenRow } from '@/lib/queries/sensor-list'

/** The moment and manner in which this member reads the page. */
type Reading = { now: number; timeZone: string; units: Units }

const KIND_LINES = { logger: 'a logger that sends its readings', 'wall hygrometer': 'we read the wall hygrometer' } as const

/** The sensors in use with their tokens and forms, the key that adds one, and those that are retired. */
export function SensorRows({
  sensors: { inUse, retired },
  reading,
}: {
  sensors: { inUse: SensorRow[]; retired: SensorRow[] }
  reading: Reading
}) {
  return (
    <>
      <AddPlate
        words="Add a sensor"
        empty={
          inUse.length > 0
            ? null
            : {
                title: 'No sensor yet',
                text: 'Every logger that sends the air of the room stands here, and every hygrometer that you read off the wall. Without readings the drying clock knows nothing.',
              }
        }
        renderForm={(onDone) => <SensorForm onDone={onDone} />}
      />
      <ul className="settings-rows">
        {inUse.map((sensor) => (
          <RowPlate
            key={sensor.id}
            title={sensor.name}
            isDemo={sensor.isDemo}
            line={KIND_LINES[sensor.kind]}
            form={<SensorForm sensor={sensor} />}
            verb="Rename"
            keys={
              <ActForm action={() => retireSensorAction(sensor.id)} label={`Retire ${sensor.name}`}>
                Retire
              </ActForm>
            }
          >
            <SensorWords sensor={sensor} reading={reading} />
            {sensor.kind === 'logger' && <Tokens sensor={sensor} reading={reading} />}
          </RowPlate>
        ))}
      </ul>
      <RetiredFold count={retired.length}>
        {retired.map((sensor) => (
          <RowPlate
            key={sensor.id}
            title={sensor.name}
            isDemo={sensor.isDemo}
            line="retired; a logger needs a new token when it comes back"
            keys={
              <ActForm action={() => reuseSensorAction(sensor.id)} label={`Use ${sensor.name} again`}>
                Use again
              </ActForm>
            }
          >
            <SensorWords sensor={sensor} reading={reading} />
          </RowPlate>
        ))}
      </RetiredFold>
    </>
  )
}

function SensorWords({ sensor: { newest, places }, reading: { now, units } }: { sensor: SensorRow; reading: Reading }) {
  return (
    <dl className="facts">
      <div>
        <dt>Newest reading</dt>
        <dd>
          {newest === null
            ? 'none yet'
            : `${formatTemperature(newest.airTempC, units.temp)}, ${formatPercent(newest.relHumidityPct)}, ${formatReadAge(newest.measuredAt, now)}`}
        </dd>
      </div>
      <div>
        <dt>Serves</dt>
        <dd>{places.length === 0 ? 'no place yet' : nameList(places)}</dd>
      </div>
    </dl>
  )
}

function Tokens({ sensor, reading }: { sensor: SensorRow; reading: Reading }) {
  const [good, revoked] = [
    sensor.tokens.filter((token) => token.revokedAt === null),
    sensor.tokens.filter((token) => token.revokedAt !== null),
  ]
  return (
    <div className="tokens">
      <h3 className="label">Tokens</h3>
      {good.length === 0 ? (
        <p>None: nothing can send for this sensor until one is issued.</p>
      ) : (
        <ul className="token-list">
          {good.map((token) => (
            <li key={token.id}>
              <TokenWords token={token} reading={reading} />
              <ActForm isHeldKey action={() => revokeTokenAction(token.id)} label={`Revoke the token ${prefixOf(token)}`}>
                Hold to revoke
              </ActForm>
            </li>
          ))}
        </ul>
      )}
      <NewToken sensorId={sensor.id} sensorName={sensor.name} />
      {revoked.length > 0 && (
        <details>
          <summary>Revoked ({revoked.length})</summary>
          <ul className="token-list">
            {revoked.map((token) => (
              <li key={token.id}>
                <TokenWords token={token} reading={reading} />
              </li>
            ))}
          </ul>
        </details>
      )}
    </div>
  )
}

const prefixOf = ({ id }: TokenRow) => `kw_${id.slice(0, 8)}…`

function TokenWords({ token, reading: { now, timeZone } }: { token: TokenRow; reading: Reading }) {
  const moment = (at: number) => formatMoment(at, now, timeZone)
  return (
    <p className="token-words">
      <code>{prefixOf(token)}</code>
      <span>
        Issued {moment(token.issuedAt)} by {token.issuedBy ?? 'Kilnward'}.{' '}
        {token.lastUsedAt === null ? 'Not used yet.' : `Last used ${moment(token.lastUsedAt)}.`}
        {token.revokedAt !== null && ` Revoked ${moment(token.revokedAt)}.`}
      </span>
    </p>
  )
}
