import type { Metadata } from 'next'
import Link from 'next/link'
import { Plate } from '@/app/_components/plate'
import { FoundryNav } from '@/app/(office)/_components/foundry-nav'
import { CodeBlock } from '@/app/(office)/api-guide/_components/code-block'
import { DoorList } from '@/app/(office)/api-guide/_components/door-list'
import { env } from '@/lib/core/env'
import { curlManyReadings, curlOneReading, publishOneReading, pythonLoop, shellLoop, TOKEN_LINE } from '@/lib/room/sending-examples'
import { requireMemberPage } from '@/lib/server/auth'
import { LARGEST_READINGS_BYTES, SENSOR_REQUESTS_PER_MINUTE } from '@/lib/server/limits'
import { PROBLEMS, problemType, type ProblemCode } from '@/lib/server/problem'
import './api-guide.css'

export const metadata: Metadata = { title: 'For programs' }

const DESCRIPTION = '/api/v1/openapi.json'

const ANSWER = `{
  "accepted": 2,
  "repeated": 1,
  "rejected": [
    { "index": 3, "reason": "measuredAt lies more than 2 min ahead: check the clock of the sensor." }
  ],
  "marked": [
    { "index": 1, "reason": "No shell room is like this: −10 to 60 °C, 0 to 105 % RH." }
  ],
  "clockOffsetSeconds": 420
}`

const PROBLEM = `{
  "type": "urn:kilnward:problem:unauthenticated",
  "title": "unauthenticated",
  "status": 401,
  "detail": "Send the token of a sensor in use: Authorization: Bearer kw_…"
}`

/** What to do about each refusal that a sensor can meet, beside what it means. */
const WHAT_TO_DO: readonly { code: ProblemCode; act: string }[] = [
  { code: 'unauthenticated', act: 'Check the token. A revoked one, or one of a retired sensor, stays refused: make a new one.' },
  { code: 'too_many_requests', act: 'Then send all the rows that have gathered in one request.' },
  { code: 'unavailable', act: 'Keep the rows, wait, send them again.' },
  { code: 'malformed', act: 'Mend the program: the body is not JSON.' },
  { code: 'unsupported_media_type', act: 'Send the header Content-Type: application/json.' },
  { code: 'invalid_input', act: 'Mend the program: the body needs the list readings, with 1 to 10,000 rows.' },
  { code: 'too_large', act: 'Send fewer rows at once.' },
  { code: 'internal', act: 'Keep the rows and send them again later. Tell whoever looks after the server.' },
]

/** The API explained to somebody with a sensor and a shell. */
export default async function ApiGuidePage() {
  const member = await requireMemberPage('sensors', '/api-guide')
  const address = new URL(env().NEXTAUTH_URL).origin
  return (
    <>
      <FoundryNav role={member.role} />
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1>For programs</h1>
          <p>How a logger, a script or another program sends readings to Kilnward.</p>
        </div>
        <a className="key" href={DESCRIPTION} target="_blank" rel="noreferrer">
          OpenAPI description
        </a>
      </div>
      <div className="api-guide">
        <Plate title="1. Get a token">
          <p>
            Each sensor has its own token. On the page{' '}
            <Link href="/settings/sensors" prefetch={false}>
              Sensors
            </Link>{' '}
            choose the sensor, make a token, and copy it: it is shown once. It begins with <code>kw_</code>, sends readings of this one
            sensor and opens nothing else. Keep it like a key; if it gets out, revoke it there and make another. In a shell, set it once for
            the lines below.
          </p>
          <CodeBlock label="The token" code={TOKEN_LINE} />
        </Plate>

        <Plate title="2. Send one reading">
          <p>
            Temperature in °C, relative humidity in %, and the moment at which they were measured: ISO 8601 with a zone, or milliseconds
            since 1970 (UTC). Every two to five minutes is enough. A row may also carry <code>pressurePa</code> of a barometer (Pa, not
            reduced to sea level), and beside the list may stand <code>batteryPct</code> and <code>sentAt</code>, the time by the
            sender&apos;s own clock.
          </p>
          <CodeBlock label="One reading" code={curlOneReading(address)} />
        </Plate>

        <Plate title="3. Send many">
          <p>
            The same door takes up to 10,000 rows at once, in any order: for a logger that was out of reach, or that wakes once an hour.
          </p>
          <CodeBlock label="Three readings" code={curlManyReadings(address)} />
        </Plate>

        <Plate title="4. What the answer means">
          <p>
            Status 200 means that the server has looked at every row. <b>Accepted</b> rows are new and kept. <b>Repeated</b> rows were known
            already, by sensor and moment, and changed nothing: if an answer gets lost, send the same rows again. <b>Rejected</b> rows were
            not kept; each comes with its place in your list, counted from 0, and the reason. Do not send rejected rows again. <b>Marked</b>{' '}
            rows are kept and shown on the page Sensors and count for nothing in the drying times: air that no shell room has, a jump that
            is gone with the next reading, a sensor that has not moved for more than 6 hours. <b>clockOffsetSeconds</b> is how far the
            sender&apos;s clock is ahead, where it is off by more than 2 minutes; Kilnward does not shift any time by it.
          </p>
          <CodeBlock label="An answer" code={ANSWER} />
        </Plate>

        <Plate title="5. When it is refused">
          <p>
            Any other status comes with a problem document (RFC 9457, <code>application/problem+json</code>). Branch on <code>type</code>;{' '}
            <code>detail</code> is a sentence for a person. Nothing of the request was kept then.
          </p>
          <CodeBlock label="A problem" code={PROBLEM} />
          <ul className="problem-list">
            {WHAT_TO_DO.map(({ code, act }) => (
              <li key={code}>
                <code>
                  <b>{PROBLEMS[code].status}</b> {problemType(code)}
                </code>
                <span>
                  {PROBLEMS[code].text} <b>{act}</b>
                </span>
              </li>
            ))}
          </ul>
        </Plate>

        <Plate title="6. Limits">
          <ul className="plain-list">
            <li>
              {SENSOR_REQUESTS_PER_MINUTE} requests a minute for each token. Past that the answer is 429, and its header Retry-After says
              how many seconds to wait.
            </li>
            <li>10,000 rows and {LARGEST_READINGS_BYTES / 1024 / 1024} MiB in a request.</li>
            <li>
              <b>The clock of the sensor:</b> a row more than 2 minutes ahead of the server is rejected. Set the clock by the network (NTP).
              A board without one can set it by the header Date, which every answer carries.
            </li>
            <li>
              <b>Late rows:</b> up to 31 days. The drying of every tree in that air is worked out anew from them; what was said on the floor
              meanwhile stays in its history. Older rows come in as a file, on the page{' '}
              <Link href="/room" prefetch={false}>
                Room
              </Link>
              .
            </li>
            <li>
              After 30 minutes without a reading the trees of that room are shown as unknown, never as dry. A batch that comes late ends
              that.
            </li>
          </ul>
        </Plate>

        <Plate title="7. A loop for the shell">
          <p>Any small computer with sh and curl. It keeps what it could not send.</p>
          <CodeBlock label="Shell loop" code={shellLoop(address)} />
        </Plate>

        <Plate title="8. The same in Python">
          <p>Nothing to install. On a board with MicroPython it uses the requests that comes with the board.</p>
          <CodeBlock label="Python loop" code={pythonLoop(address)} />
        </Plate>

        <Plate title="9. Through a broker">
          <p>
            A logger that speaks MQTT needs no token: Kilnward listens to the broker on your network. An owner sets it on the page{' '}
            <Link href="/settings/mqtt" prefetch={false}>
              MQTT
            </Link>
            , and there you say which topic feeds which sensor and where in its messages the figures stand. For the line below: topic{' '}
            <code>shellroom/loft/air</code>, temperature <code>temp</code>, humidity <code>rh</code>, time <code>at</code> in seconds since
            1970.
          </p>
          <CodeBlock label="One reading, published" code={publishOneReading()} />
          <ul className="plain-list">
            <li>
              <b>Send the time along</b>, and publish with QoS 1 (<code>-q 1</code>): then what comes while Kilnward is away waits at the
              broker and counts for its own moment, and a message that comes twice is one reading.
            </li>
            <li>
              Without a time the moment of arrival counts, to ten seconds. A kept (retained) message, and one that has waited for more than
              2 minutes, is then passed over: nobody knows how old it is.
            </li>
            <li>The rest is as for the door above: the same limits for each row, and rows known by sensor and moment.</li>
            <li>The page shows the last message on each topic and why it was refused.</li>
          </ul>
        </Plate>

        <Plate title="10. Every door">
          <p>
            This list comes from the{' '}
            <a href={DESCRIPTION} target="_blank" rel="noreferrer">
              OpenAPI description
            </a>
            , which also holds the shape of every body and answer, and from which clients can be made. Members&apos; doors take the session
            of the sign-in page and are there for Kilnward&apos;s own screens; a token of a sensor does not open them.
          </p>
          <DoorList address={address} />
        </Plate>
        <p className="caution">
          A sensor that hangs by a heater or in a draught makes the drying times wrong. Hang it among the trees. Kilnward advises; a person
          decides.
        </p>
      </div>
    </>
  )
}
