import { appendFileSync, existsSync, mkdirSync, readFileSync, rmSync, utimesSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { beforeAll, describe, expect, it } from 'vitest'
import { importNext, type ImportParts } from '@/jobs/import-uploads'
import { cancelUpload } from '@/lib/commands/cancel-upload'
import { pruneUploads } from '@/lib/commands/prune-uploads'
import { queueUpload } from '@/lib/commands/queue-upload'
import { receiveUpload } from '@/lib/commands/receive-upload'
import { retireSensor } from '@/lib/commands/save-sensor'
import { claimUpload, endUpload, LostUpload, recordChunk } from '@/lib/commands/work-on-upload'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadUploadDetail, loadUploadList } from '@/lib/queries/upload-list'
import { loadUploadPreview } from '@/lib/queries/upload-preview'
import { loadUploadErrors } from '@/lib/queries/upload-status'
import { errorsFile, rowsFile } from '@/lib/server/upload-files'
import type { UploadSettings } from '@/lib/uploads/upload-settings'
import { DoseHour, FoundryEvent, Reading, Sensor, Upload } from '@/models'
import { buildFoundry, buildMember, HOUR, MINUTE, NOW, stoppedClock } from '@/tests/factories/shell-room'

const clock = stoppedClock()
let supervisor: Actor
let sensors = 0

beforeAll(async () => {
  await buildFoundry()
  supervisor = await buildMember('supervisor')
})

const freshSensor = async () => (await Sensor.create({ name: `Gauge ${(sensors += 1)}`, kind: 'logger', createdAt: NOW })).id
const by = () => ({ member: supervisor, clock })

/** A worker whose waits take no time; `stopAfter` chunks it is asked to stop. */
function worker({ stopAfter = Infinity } = {}): ImportParts {
  let waits = 0
  return { clock, isStopping: () => waits >= stopAfter, monotonic: () => 0, sleep: async () => void (waits += 1) }
}

const streamOf = (text: string | Uint8Array) => new Blob([text as BlobPart]).stream()

async function bring(sensorId: number, text: string, change: Partial<UploadSettings> = {}) {
  const { uploadId, repeatOf } = await receiveUpload({ sensorId, fileName: 'gauge.csv', body: streamOf(text), announcedBytes: 0 }, by())
  const { settings } = await loadUploadPreview(uploadId, null, { clock })
  return { uploadId, repeatOf, settings: { ...settings, ...change } }
}

/** A file of five-minute rows up to now. */
function fileOf(rows: number, { bad = () => false }: { bad?: (index: number) => boolean } = {}): string {
  const lines = Array.from({ length: rows }, (_, index) => {
    const at = new Date(NOW - (rows - index) * 5 * MINUTE).toISOString()
    return bad(index) ? `${at},warm,50` : `${at},${(21 + (index % 37) / 20).toFixed(2)},${(50 + (index % 23) / 4).toFixed(2)}`
  })
  return `time,temperature,humidity\n${lines.join('\n')}\n`
}

const hoursOf = async (sensorId: number) =>
  (await DoseHour.findAll({ where: { sensorId }, order: ['hourStart'], raw: true })).map((hour) => ({
    hourStart: hour.hourStart,
    doseLikely: Number(hour.doseLikely.toPrecision(12)),
    readingCount: hour.readingCount,
  }))

describe('an upload', () => {
  it('is a draft until somebody says how it is read; then its rows are readings and hours, with lines in the history', async () => {
    const sensorId = await freshSensor()
    const { uploadId, settings } = await bring(sensorId, fileOf(300))
    expect(await importNext(worker())).toBe('nothing')
    await queueUpload(uploadId, settings, by())
    expect(await importNext(worker())).toBe('done')
    expect(await Upload.findByPk(uploadId)).toMatchObject({
      state: 'done',
      added: 300,
      repeated: 0,
      marked: 0,
      rejected: 0,
      linesDone: 301,
    })
    expect(await Reading.count({ where: { sensorId, source: 'sensor', enteredBy: supervisor.id } })).toBe(300)
    expect((await hoursOf(sensorId)).reduce((sum, hour) => sum + hour.readingCount, 0)).toBe(300)
    const lines = await FoundryEvent.findAll({ where: { subjectId: String(sensorId) }, order: ['id'] })
    expect(lines.map(({ kind, detail }) => [kind, detail['text']])).toEqual([
      ['upload begun', expect.stringMatching(/^Readings for Gauge \d+ are being read from the file gauge\.csv\.$/)],
      ['upload ended', expect.stringMatching(/^The file gauge\.csv for Gauge \d+ is read: 300 new\.$/)],
    ])
    expect((await loadUploadList())[0]).toMatchObject({ id: uploadId, state: 'done', added: 300, authorName: supervisor.name })
  })

  it('brought twice changes nothing, and says when it was read before', async () => {
    const sensorId = await freshSensor()
    const first = await bring(sensorId, fileOf(60))
    await queueUpload(first.uploadId, first.settings, by())
    await importNext(worker())
    const before = await hoursOf(sensorId)
    const again = await bring(sensorId, fileOf(60))
    expect(again.repeatOf).toEqual({ uploadId: first.uploadId, importedAt: NOW })
    expect(await loadUploadDetail(again.uploadId)).toMatchObject({ repeatOf: null })
    await queueUpload(again.uploadId, again.settings, by())
    await importNext(worker())
    expect(await Upload.findByPk(again.uploadId)).toMatchObject({ added: 0, repeated: 60 })
    expect(await hoursOf(sensorId)).toEqual(before)
    // The same file for another sensor is no repeat.
    expect((await bring(await freshSensor(), fileOf(60))).repeatOf).toBeNull()
  })

  it('goes on behind the last row that is in, when its worker is killed or stopped, and ends as if nothing had been', async () => {
    const text = fileOf(1500, { bad: (index) => index % 50 === 7 })
    const whole = await freshSensor()
    const one = await bring(whole, text)
    await queueUpload(one.uploadId, one.settings, by())
    await importNext(worker())

    const sensorId = await freshSensor()
    const { uploadId, settings } = await bring(sensorId, text)
    await queueUpload(uploadId, settings, by())
    expect(await importNext(worker({ stopAfter: 1 }))).toBe('given back')
    const half = await Upload.findByPk(uploadId, { rejectOnEmpty: true })
    expect(half.state).toBe('running')
    expect(half.added).toBeGreaterThan(0)
    expect(half.added).toBeLessThan(1470)
    // Killed between the file of refused rows and the commit: what it had written of its last chunk is no part of the file.
    const dead = await claimUpload({ clock })
    appendFileSync(errorsFile(uploadId), '9999,Half a chunk,that was never committed')
    expect(await importNext(worker())).toBe('nothing')
    expect(await importNext({ ...worker(), clock: stoppedClock(NOW + 31_000) })).toBe('done')
    expect(await Upload.findByPk(uploadId)).toMatchObject({ state: 'done', added: 1470, repeated: 0, rejected: 30, linesDone: 1501 })
    expect(await hoursOf(sensorId)).toEqual(await hoursOf(whole))
    expect(readFileSync(errorsFile(uploadId), 'utf8')).toBe(readFileSync(errorsFile(one.uploadId), 'utf8'))
    // The dead worker comes to life again: it has lost the upload, and nothing of its chunk is kept.
    const row = { measuredAt: NOW - HOUR * 5000, airTempC: 20, relHumidityPct: 50 }
    const chunk = { rows: [row], rejected: 0, bytesDone: 1, linesDone: 1, lastAt: null, errorsBytes: 0 }
    await expect(recordChunk(dead!, chunk, { clock })).rejects.toBeInstanceOf(LostUpload)
    await endUpload(dead!, 'Too late.', { clock })
    expect(await Reading.count({ where: { sensorId, measuredAt: row.measuredAt } })).toBe(0)
    expect(await Upload.findByPk(uploadId)).toMatchObject({ state: 'done', error: null })
  })

  it('keeps what is bad apart: refused rows with line and reason, impossible air as kept and not counted', async () => {
    const sensorId = await freshSensor()
    const at = (minutes: number) => new Date(NOW - minutes * MINUTE).toISOString()
    const { uploadId, settings } = await bring(
      sensorId,
      [
        'time,temperature,humidity,note',
        `${at(30)},21.0,50,ok`,
        `${at(25)},=cmd|'/c calc'!A1,50,"=HYPERLINK(""http://x"")"`,
        `${at(20)},21.1,51,"an open mark`,
        `${at(15)},99,50,hot`,
        '',
        `${new Date(NOW + HOUR).toISOString()},21,50,ahead`,
        `${at(10)},21.2,51,ok`,
        `${at(10)},21.2,51,twice`,
        `${at(5)},21.3,52`,
      ].join('\r\n'),
    )
    await queueUpload(uploadId, settings, by())
    await importNext(worker())
    expect(await Upload.findByPk(uploadId)).toMatchObject({ state: 'done', added: 4, repeated: 1, marked: 1, rejected: 3 })
    expect(await Reading.count({ where: { sensorId } })).toBe(3)
    const errors = await loadUploadErrors(uploadId)
    expect(readFileSync(errors!.file, 'utf8').split('\r\n')).toEqual([
      'line,reason,as it stands in the file',
      `3,The temperature ‘=cmd|'/c calc'!A1’ is no number.,${at(25)},'=cmd|'/c calc'!A1,50,"'=HYPERLINK(""http://x"")"`,
      '4,"This line cannot be split into columns: it is too long, or a quotation mark is not closed."',
      `5,"Kept, and not counted: No shell room is like this: −10 to 60 °C, 0 to 105 % RH.",${at(15)},99,50,hot`,
      expect.stringMatching(/^7,"The time ‘.+’ lies ahead:/),
      '',
    ])
  })

  it('reads rows from years ago, in files of any encoding', async () => {
    const sensorId = await freshSensor()
    const text = 'Zeit;Temp. (°C);Feuchte (%)\r\n12.03.2009 08:00;21,4;52,0\r\n13.03.2009 08:00;21,5;51,0\r\n'
    const body = streamOf(Buffer.from(`\uFEFF${text}`, 'utf16le'))
    const { uploadId } = await receiveUpload({ sensorId, fileName: 'alt.txt', body, announcedBytes: 0 }, by())
    const preview = await loadUploadPreview(uploadId, null, { clock })
    expect(preview).toMatchObject({
      dates: 'sure',
      good: 2,
      looked: 2,
      settings: { encoding: 'utf-16le', dateForm: 'dmy', hasDecimalComma: true },
    })
    await queueUpload(uploadId, preview.settings, by())
    await importNext(worker())
    const [first] = await Reading.findAll({ where: { sensorId }, order: ['measuredAt'] })
    expect([new Date(first!.measuredAt).toISOString(), first!.airTempC]).toEqual(['2009-03-12T08:00:00.000Z', 21.4])
  })

  it('looks all over a long file for a day past the twelfth, and asks where there is none', async () => {
    const line = (day: number, index: number) =>
      `${String(day).padStart(2, '0')}/04/2026 ${String(index % 24).padStart(2, '0')}:${String(index % 60).padStart(2, '0')};21,4;52,0;${'filling '.repeat(6)}`
    const many = (last: number) => Array.from({ length: 6000 }, (_, index) => line(1 + Math.floor((index / 6000) * last), index)).join('\n')
    const sure = await bring(await freshSensor(), `Time;Temp;RH;Note\n${many(20)}\n`)
    expect(sure.settings.dateForm).toBe('dmy')
    const open = await bring(await freshSensor(), `Time;Temp;RH;Note\n${many(9)}\n`)
    expect(open.settings.dateForm).toBeNull()
    expect(await loadUploadPreview(open.uploadId, null, { clock })).toMatchObject({
      dates: 'ambiguous',
      good: 0,
      dateForms: ['dmy', 'mdy'],
    })
    await expect(queueUpload(open.uploadId, open.settings, by())).rejects.toMatchObject({ code: 'invalid_input' })
  })

  it('is not handed over when not one row can be read, and not twice', async () => {
    const { uploadId, settings } = await bring(await freshSensor(), fileOf(5))
    await expect(queueUpload(uploadId, { ...settings, hasDecimalComma: true }, by())).rejects.toMatchObject({ code: 'unprocessable' })
    await queueUpload(uploadId, settings, by())
    await expect(queueUpload(uploadId, settings, by())).rejects.toMatchObject({ code: 'conflict' })
    await importNext(worker())
  })

  it('can be stopped while it is read: what is in stays', async () => {
    const sensorId = await freshSensor()
    const { uploadId, settings } = await bring(sensorId, fileOf(900))
    await queueUpload(uploadId, settings, by())
    const stopping = worker()
    const parts = {
      ...stopping,
      sleep: async () => {
        if ((await Upload.findByPk(uploadId))?.state === 'running') await cancelUpload(uploadId, by())
      },
    }
    expect(await importNext(parts)).toBe('lost')
    const upload = await Upload.findByPk(uploadId, { rejectOnEmpty: true })
    expect(upload.state).toBe('cancelled')
    expect(await Reading.count({ where: { sensorId } })).toBe(upload.added)
    expect(upload.added).toBeGreaterThan(0)
    expect(existsSync(rowsFile(uploadId))).toBe(false)
    await expect(cancelUpload(uploadId, by())).rejects.toMatchObject({ code: 'conflict' })
  })

  it('is given up when its file is gone, as after a restored backup', async () => {
    const { uploadId, settings } = await bring(await freshSensor(), fileOf(5))
    await queueUpload(uploadId, settings, by())
    rmSync(rowsFile(uploadId))
    expect(await importNext(worker())).toBe('failed')
    expect(await Upload.findByPk(uploadId)).toMatchObject({ state: 'failed', error: 'Its file is not here any more. Bring it again.' })
  })
})

describe('a file that comes in', () => {
  const receive = (sensorId: number, body: ReadableStream<Uint8Array> | null, announcedBytes = 0) =>
    receiveUpload({ sensorId, fileName: 'gauge.csv', body, announcedBytes }, by())

  it('is refused when it is empty, too large, for no sensor or for a retired one; nothing stays', async () => {
    const sensorId = await freshSensor()
    const before = await Upload.count()
    await expect(receive(sensorId, null)).rejects.toMatchObject({ code: 'unprocessable' })
    await expect(receive(sensorId, streamOf('x'), 300 * 1024 * 1024)).rejects.toMatchObject({ code: 'too_large' })
    await expect(receive(4040, streamOf('x'))).rejects.toMatchObject({ code: 'not_found' })
    await retireSensor(sensorId, by())
    await expect(receive(sensorId, streamOf('x'))).rejects.toMatchObject({ code: 'conflict' })
    expect(await Upload.count()).toBe(before)
  })

  it('that breaks off leaves nothing', async () => {
    const broken = new ReadableStream<Uint8Array>({
      pull: (controller) => controller.error(Object.assign(new Error('gone'), { code: 'ECONNRESET' })),
    })
    await expect(receive(await freshSensor(), broken)).rejects.toMatchObject({ code: 'malformed' })
  })

  it('is taken from the disk when nobody needs it any more', async () => {
    const later = (milliseconds: number) => ({ clock: stoppedClock(NOW + milliseconds) })
    const DAY = 24 * HOUR
    const draft = await bring(await freshSensor(), fileOf(5))
    const done = await bring(await freshSensor(), fileOf(20, { bad: (index) => index === 3 }))
    await queueUpload(done.uploadId, done.settings, by())
    await importNext(worker())
    const orphan = newId(NOW)
    mkdirSync(join(process.env['DATA_DIR']!, 'uploads'), { recursive: true })
    writeFileSync(rowsFile(orphan), 'x')
    utimesSync(rowsFile(orphan), NOW / 1000, NOW / 1000)
    const there = () =>
      [rowsFile(draft.uploadId), rowsFile(done.uploadId), errorsFile(done.uploadId), rowsFile(orphan)].map((file) => existsSync(file))
    await pruneUploads(later(HOUR))
    expect(there()).toEqual([true, true, true, true])
    await pruneUploads(later(DAY + HOUR))
    expect(there()).toEqual([false, true, true, false])
    expect((await Upload.findByPk(draft.uploadId))?.state).toBe('cancelled')
    await pruneUploads(later(8 * DAY))
    expect(there()).toEqual([false, false, true, false])
    await pruneUploads(later(91 * DAY))
    expect(there()).toEqual([false, false, false, false])
    expect(await loadUploadErrors(done.uploadId)).toBeNull()
  })
})
