import type { Metadata } from 'next'
import { Icon } from '@/app/_components/icons'
import { KeyLink } from '@/app/_components/key'
import { Plate } from '@/app/_components/plate'
import { EmptyState } from '@/app/(office)/_components/empty-state'
import { FoundryNav } from '@/app/(office)/_components/foundry-nav'
import { KeepFresh } from '@/app/(office)/_components/keep-fresh'
import { BrokerForm } from '@/app/(office)/settings/mqtt/_components/broker-form'
import { LookAgain } from '@/app/(office)/settings/mqtt/_components/look-again'
import { MessageList } from '@/app/(office)/settings/mqtt/_components/message-list'
import { TopicRows } from '@/app/(office)/settings/mqtt/_components/topic-rows'
import '@/app/(office)/settings/settings.css'
import { systemClock } from '@/lib/core/clock'
import { may } from '@/lib/members/roles'
import { connectionWords } from '@/lib/mqtt/connection-words'
import { loadMqttPage, type MqttPage } from '@/lib/queries/mqtt-page'
import { requireMemberPage } from '@/lib/server/auth'
import './mqtt.css'

export const metadata: Metadata = { title: 'MQTT' }

/** The broker from which loggers' readings come, what it is asked for, and what came. */
export default async function MqttPage() {
  const member = await requireMemberPage('sensors', '/settings/mqtt')
  const page = await loadMqttPage({ clock: systemClock })
  const mayChange = may(member.role, 'settings')
  return (
    <>
      <KeepFresh />
      <FoundryNav role={member.role} />
      <div className="page-head">
        <div>
          <h1>MQTT</h1>
          <p>Loggers that publish to a broker on your own network give readings without a token.</p>
        </div>
      </div>
      <div className="settings-page">
        <Plate title="The broker" line={mayChange ? undefined : 'an owner can change it'}>
          <div className="mqtt-broker">
            <BrokerState page={page} />
            {mayChange && (
              <BrokerForm
                broker={{
                  isOn: page.broker === null || page.state.isOn,
                  address: page.broker?.address ?? '',
                  userName: page.broker?.userName ?? '',
                  hasPassword: page.broker?.hasPassword ?? false,
                }}
              />
            )}
          </div>
        </Plate>
        <h2 className="settings-title">Topics</h2>
        {page.sensors.length === 0 && page.topics.length === 0 ? (
          <EmptyState
            title="No logger yet"
            action={
              <KeyLink href="/settings/sensors" tone="go">
                To the sensors
              </KeyLink>
            }
          >
            A topic feeds a sensor of the kind ‘a logger that sends its readings’, so that one comes first.
          </EmptyState>
        ) : (
          <TopicRows topics={page.topics} sensors={page.sensors} />
        )}
        <section className="plate" aria-labelledby="what-came">
          <header>
            <h2 id="what-came">What came</h2>
            <p>the last message on each topic</p>
          </header>
          <div className="plate-body">
            <LookAgain />
          </div>
          <MessageList messages={page.messages} now={page.now} timeZone={page.timeZone} />
        </section>
      </div>
    </>
  )
}

function BrokerState({ page: { broker, state, counts, now, timeZone } }: { page: MqttPage }) {
  if (broker === null) return <p>No broker is set: Kilnward listens to none.</p>
  const { isGood, text } = connectionWords(state, { now, timeZone })
  const isConnected = state.isOn && state.connectedSince !== null
  const tone = !isGood ? 'state-furnace' : isConnected ? 'state-verdigris' : 'state-soot'
  return (
    <div className="mqtt-state">
      <p className={`state ${tone}`} role="status">
        <Icon name={!isGood ? 'warning' : isConnected ? 'check' : 'minus'} />
        <span>{text}</span>
      </p>
      <dl className="facts">
        <div>
          <dt>Address</dt>
          <dd>{broker.address}</dd>
        </div>
        <div>
          <dt>In the last 24 h</dt>
          <dd>
            {count(counts.messages, 'message')}, {count(counts.readings, 'new reading')}, {counts.refused} refused
            {counts.dropped > 0 && `, ${counts.dropped} dropped because they came too fast`}
          </dd>
        </div>
        <div>
          <dt>Kilnward’s own topic</dt>
          <dd>{broker.statusTopic}: ‘online’, or ‘offline’ when it is gone</dd>
        </div>
      </dl>
    </div>
  )
}

const count = (value: number, word: string) => `${value} ${word}${value === 1 ? '' : 's'}`
