'use client'

import { AddPlate } from '@/app/(office)/settings/_components/add-plate'
import { ActForm } from '@/app/(office)/settings/_components/act-form'
import { RowPlate } from '@/app/(office)/settings/_components/row-plate'
import { TopicForm } from '@/app/(office)/settings/mqtt/_components/topic-form'
import { removeTopicAction } from '@/app/(office)/settings/mqtt/actions'
import { UNIT_SIGNS } from '@/lib/format/units'
import type { TimeForm } from '@/lib/mqtt/time-form'
import { topicFormValues } from '@/lib/mqtt/topic-input'
import type { MqttTopicRow } from '@/lib/queries/mqtt-page'

const TIME_WORDS: Record<TimeForm, string> = {
  arrival: 'the moment of arrival',
  'epoch s': 'in seconds since 1970',
  'epoch ms': 'in milliseconds since 1970',
  iso: 'in ISO 8601',
}

/** The topics with what they feed, their forms, and the key that adds one. */
export function TopicRows({ topics, sensors }: { topics: readonly MqttTopicRow[]; sensors: readonly { id: number; name: string }[] }) {
  return (
    <div>
      <AddPlate
        words="Add a topic"
        empty={
          topics.length > 0
            ? null
            : {
                title: 'No topic yet',
                text: 'Every topic on which a logger publishes the air of the room stands here, with the sensor that it feeds.',
              }
        }
        renderForm={(onDone) => <TopicForm sensors={sensors} onDone={onDone} />}
      />
      <ul className="settings-rows">
        {topics.map((topic) => (
          <RowPlate
            key={topic.id}
            title={topic.filter}
            isDemo={topic.isDemo}
            line={topic.isSensorRetired ? `${topic.sensorName} is retired: not listened to` : `feeds ${topic.sensorName}`}
            form={<TopicForm sensors={sensors} topic={{ id: topic.id, values: topicFormValues(topic) }} />}
            keys={
              <ActForm isHeldKey action={() => removeTopicAction(topic.id)} label={`Remove ${topic.filter}`}>
                Hold to remove
              </ActForm>
            }
          >
            <TopicWords topic={topic} />
          </RowPlate>
        ))}
      </ul>
    </div>
  )
}

function TopicWords({ topic }: { topic: MqttTopicRow }) {
  const rows: [string, string][] = [
    ['Temperature', topic.tempPath === null ? 'not told here' : `${topic.tempPath}, ${UNIT_SIGNS[topic.tempUnit]}`],
    ['Humidity', topic.rhPath === null ? 'not told here' : `${topic.rhPath}, %`],
    ['Time', topic.timePath === null ? TIME_WORDS.arrival : `${topic.timePath}, ${TIME_WORDS[topic.timeForm]}`],
  ]
  if (topic.pressurePath !== null) rows.push(['Air pressure', topic.pressurePath])
  if (topic.batteryPath !== null) rows.push(['Battery', topic.batteryPath])
  return (
    <dl className="facts">
      {rows.map(([word, path]) => (
        <div key={word}>
          <dt>{word}</dt>
          <dd>{path}</dd>
        </div>
      ))}
    </dl>
  )
}
