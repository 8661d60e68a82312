// What the guide shows. The tests run each of them against a server, as it stands here.

/** Sets the token for the lines below it. */
export const TOKEN_LINE = "TOKEN='kw_…'"

const SEND = (address: string) => `curl -sS ${address}/api/v1/readings \\
  -H "Authorization: Bearer $TOKEN" \\
  -H 'Content-Type: application/json' \\
`

/** One reading of this moment, by curl. `address` without a slash at the end. */
export function curlOneReading(address: string): string {
  return `${SEND(address)}  -d "{\\"readings\\":[{\\"measuredAt\\":\\"$(date -u +%Y-%m-%dT%H:%M:%SZ)\\",\\"airTempC\\":21.4,\\"relHumidityPct\\":52.5}]}"`
}

/** Three readings of the last ten minutes, by curl. */
export function curlManyReadings(address: string): string {
  return `NOW=$(date +%s)000
${SEND(address)}  -d "{\\"readings\\":[
    {\\"measuredAt\\":$((NOW - 600000)),\\"airTempC\\":21.2,\\"relHumidityPct\\":53.0},
    {\\"measuredAt\\":$((NOW - 300000)),\\"airTempC\\":21.3,\\"relHumidityPct\\":52.7},
    {\\"measuredAt\\":$NOW,\\"airTempC\\":21.4,\\"relHumidityPct\\":52.5}
  ]}"`
}

/** A reading published to a broker, for a topic whose paths are temp, rh and at, with the time in seconds. */
export function publishOneReading(): string {
  return `mosquitto_pub -h 192.168.1.20 -q 1 -t shellroom/loft/air \\
  -m "{\\"temp\\":21.4,\\"rh\\":52.5,\\"at\\":$(date +%s)}"`
}

/** A loop for a small computer with a shell: nothing is lost while the network is away. */
export function shellLoop(address: string): string {
  return `#!/bin/sh
${TOKEN_LINE}
WAITING=waiting.txt

# Put your own sensor here: temperature in °C, a space, relative humidity in %.
read_sensor() { echo '21.4 52.5'; }

while :; do
  set -- $(read_sensor)
  echo "{\\"measuredAt\\":$(date +%s)000,\\"airTempC\\":$1,\\"relHumidityPct\\":$2}" >> "$WAITING"
  # What could not be sent stays in the file and goes with the next reading.
  if echo "{\\"readings\\":[$(tail -n 9000 "$WAITING" | paste -sd, -)]}" |
    curl -sS --fail --max-time 20 ${address}/api/v1/readings \\
      -H "Authorization: Bearer $TOKEN" -H 'Content-Type: application/json' -d @-
  then : > "$WAITING"
  fi
  sleep 300
done`
}

/** The same in Python, for a computer and, with its own \`requests\`, for MicroPython. */
export function pythonLoop(address: string): string {
  return `import json, time

TOKEN = 'kw_…'
URL = '${address}/api/v1/readings'
HEADERS = {'Authorization': 'Bearer ' + TOKEN, 'Content-Type': 'application/json'}

try:
    from urllib.request import Request, urlopen

    def post(body):
        with urlopen(Request(URL, body.encode(), HEADERS), timeout=20) as answer:
            return json.loads(answer.read())
except ImportError:  # MicroPython
    import requests

    def post(body):
        answer = requests.post(URL, data=body, headers=HEADERS, timeout=20)
        try:
            if answer.status_code != 200:
                raise OSError(answer.status_code)
            return answer.json()
        finally:
            answer.close()

# The clock of some boards counts from the year 2000.
EPOCH = 946684800 if time.gmtime(0)[0] == 2000 else 0

def read_sensor():
    return 21.4, 52.5  # put your own sensor here: °C and % relative humidity

waiting = []
while True:
    temp, humidity = read_sensor()
    at = (int(time.time()) + EPOCH) * 1000
    waiting.append({'measuredAt': at, 'airTempC': temp, 'relHumidityPct': humidity})
    try:
        print(post(json.dumps({'readings': waiting})))
        waiting = []
    except OSError as error:  # away, busy or refused: kept for the next time
        print('not sent:', error)
        waiting = waiting[-5000:]
    time.sleep(300)`
}
