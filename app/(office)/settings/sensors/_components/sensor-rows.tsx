'use client'

import { KeyLink } from '@/app/_components/key'
import { AddPlate } from '@/app/(office)/settings/_components/add-plate'
import { ActForm } from '@/app/(office)/settings/_components/act-form'
import { RetiredFold } from '@/app/(office)/settings/_components/retired-fold'
import { RowPlate } from '@/app/(office)/settings/_components/row-plate'
import { NewToken } from '@/app/(office)/settings/sensors/_components/new-token'
import { SensorWarnings, SensorWords, type SensorReader } from '@/app/(office)/settings/sensors/_components/sensor-words'
import { SensorForm } from '@/app/(office)/settings/sensors/_components/sensor-form'
import { retireSensorAction, reuseSensorAction, revokeTokenAction } from '@/app/(office)/settings/sensors/actions'
import { formatMoment } from '@/lib/format/local-time'
import type { SensorRow, TokenRow } from '@/lib/queries/sensor-list'

const KIND_LINES = { logger: 'a logger that sends its readings', 'wall hygrometer': 'we read the wall hygrometer' } as const

/** The sensors in use with their tokens and forms, the key that adds one, and those that are retired. */
export function SensorRows({
  sensors: { inUse, retired },
  reading,
  hasOwnPages = false,
}: {
  sensors: { inUse: SensorRow[]; retired: SensorRow[] }
  reading: SensorReader
  /** Whether a key leads to each sensor's own page; the first run goes straight on. */
  hasOwnPages?: boolean
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
              <>
                {hasOwnPages && <KeyLink href={`/settings/sensors/${sensor.id}`}>Offset, device, marked readings</KeyLink>}
                <ActForm action={() => retireSensorAction(sensor.id)} label={`Retire ${sensor.name}`}>
                  Retire
                </ActForm>
              </>
            }
          >
            <SensorWarnings sensor={sensor} reading={reading} />
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

function Tokens({ sensor, reading }: { sensor: SensorRow; reading: SensorReader }) {
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

function TokenWords({ token, reading: { now, timeZone } }: { token: TokenRow; reading: SensorReader }) {
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
