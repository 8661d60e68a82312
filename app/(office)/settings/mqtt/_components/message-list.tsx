import { Icon, type IconName } from '@/app/_components/icons'
import { EmptyState } from '@/app/(office)/_components/empty-state'
import { formatMoment } from '@/lib/format/local-time'
import type { MessageOutcome } from '@/lib/mqtt/sort-messages'
import type { MqttMessageRow } from '@/lib/queries/mqtt-page'

const OUTCOMES: Record<MessageOutcome, { word: string; icon: IconName; tone: string }> = {
  taken: { word: 'Taken', icon: 'check', tone: 'state-verdigris' },
  'set aside': { word: 'Not counted', icon: 'warning', tone: 'state-ochre' },
  waiting: { word: 'Half', icon: 'plus', tone: 'state-soot' },
  repeated: { word: 'Known already', icon: 'check', tone: 'state-soot' },
  'passed over': { word: 'Passed over', icon: 'minus', tone: 'state-ochre' },
  refused: { word: 'Refused', icon: 'warning', tone: 'state-furnace' },
}

/** The last message on each topic, newest first: what it said, and what became of it. */
export function MessageList({ messages, now, timeZone }: { messages: readonly MqttMessageRow[]; now: number; timeZone: string }) {
  if (messages.length === 0) {
    return (
      <EmptyState title="Nothing yet">
        What comes on the topics above stands here, as it came, with what became of it. So a path that leads to nothing can be mended.
      </EmptyState>
    )
  }
  return (
    <ul className="mqtt-messages">
      {messages.map(({ topic, receivedAt, text, outcome, reason }) => {
        const { word, icon, tone } = OUTCOMES[outcome]
        return (
          <li key={topic}>
            <p className="mqtt-message-head">
              <b>{topic}</b>
              <span className="text-soot">{formatMoment(receivedAt, now, timeZone)}</span>
              <span className={`state ${tone}`}>
                <Icon name={icon} />
                {word}
              </span>
            </p>
            {reason !== '' && <p>{reason}</p>}
            <code>{text === '' ? '(empty)' : text}</code>
          </li>
        )
      })}
    </ul>
  )
}
