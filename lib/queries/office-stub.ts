// Stand-in data until the real reads land on this branch's base. Not part of the product.
import { existsSync, readFileSync } from 'node:fs'
import type { QueueTree } from '@/lib/queue/contract'
import type { TreeState } from '@/lib/trees/states'
import type { CoatRow, TreeDetail } from '@/lib/trees/detail-contract'

export const STUB_NOW = Date.parse('2026-10-13T14:10:00Z')
const HOUR = 3_600_000
const uuid = (kind: string, n: number) => `00000000-0000-4000-8000-${kind}${String(n).padStart(12 - kind.length, '0')}`

export function stubScene(): string {
  return existsSync('data/office-scene') ? readFileSync('data/office-scene', 'utf8').trim() : 'usual'
}
export function stubRole(): string {
  return existsSync('data/office-role') ? readFileSync('data/office-role', 'utf8').trim() : 'supervisor'
}

const COATS: QueueTree['coats'] = [
  { kind: 'face', stucco: 'fine' },
  { kind: 'face', stucco: 'fine' },
  { kind: 'backup', stucco: 'medium' },
  { kind: 'backup', stucco: 'medium' },
  { kind: 'backup', stucco: 'coarse' },
  { kind: 'backup', stucco: 'coarse' },
  { kind: 'backup', stucco: 'coarse' },
  { kind: 'seal', stucco: 'none' },
]
const LONG_COATS: QueueTree['coats'] = [
  ...COATS.slice(0, 4),
  ...Array.from({ length: 9 }, (): QueueTree['coats'][number] => ({ kind: 'backup', stucco: 'coarse' })),
  { kind: 'seal', stucco: 'none' },
]

const PLACES = ['Rack A 1', 'Rack A 2', 'Rack B 4', 'Rack B 5', 'Rail 2', 'Drying cabinet']
export const stubPlaces = PLACES.map((name, index) => ({ id: uuid('a', index + 1), name }))

function tree(n: number, tag: string, title: string, state: TreeState, over: Partial<QueueTree> = {}): QueueTree {
  const coats = over.coats ?? COATS
  const isOut = ['last coat on', 'dried out', 'ready for burnout', 'released'].includes(state)
  const coatsOn = over.coatsOn ?? (isOut ? coats.length : state === 'bare wax' || state === 'wax ready' ? 0 : 5)
  const isOpen = ['wet', 'drying', 'nearly dry', 'last coat on', 'unknown'].includes(state)
  const mr = state === 'wet' ? 0.72 : state === 'drying' ? 0.17 : state === 'nearly dry' ? 0.12 : state === 'last coat on' ? 0.3 : 0.04
  const nextCoat = coats[coatsOn]
  const likely = state === 'wet' ? 3 : state === 'nearly dry' ? 0.3 : state === 'last coat on' ? 14 : 70 / 60
  const safe = state === 'wet' ? 4.2 : state === 'nearly dry' ? 0.8 : state === 'last coat on' ? 19 : 2
  const isDry = ['dip now', 'waiting', 'overdue'].includes(state)
  return {
    id: uuid('t', n).replace('t', 'e'),
    tag,
    title,
    place: stubPlaces[n % stubPlaces.length]!,
    state,
    stateSince: isDry ? STUB_NOW - (state === 'overdue' ? 65 : state === 'waiting' ? 35 : 4) * 60_000 : isOut && !isOpen ? STUB_NOW - 20 * HOUR : null,
    coatsOn,
    newestCoat: coatsOn === 0 ? null : { id: uuid('c', n * 100 + coatsOn), number: coatsOn, dippedAt: STUB_NOW - 4.25 * HOUR },
    coats,
    openDry: isOpen && state !== 'unknown' ? 1 - mr : state === 'unknown' ? 0.4 : null,
    openTarget: coatsOn === coats.length ? 0.95 : 0.9,
    moistureRatio: coatsOn === 0 || state === 'released' ? null : mr,
    next:
      nextCoat && state !== 'released' && state !== 'scrapped'
        ? {
            number: coatsOn + 1,
            kind: nextCoat.kind,
            bathId: uuid('b', nextCoat.kind === 'face' ? 1 : 2),
            bathName: nextCoat.kind === 'face' ? 'Face' : 'Backup',
            stucco: nextCoat.stucco,
            drainSeconds: 45,
            isPrewet: false,
            readAloud: 'Backup slurry, coarse stucco, drain 45 s.',
          }
        : null,
    guard: coatsOn === 0 ? null : coatsOn === coats.length ? 'safe' : 'likely',
    dry:
      coatsOn === 0 || state === 'unknown' || state === 'released' || state === 'scrapped'
        ? null
        : isDry
          ? { earliestAt: null, likelyAt: STUB_NOW - 1.2 * HOUR, safeAt: STUB_NOW - 0.5 * HOUR }
          : { earliestAt: STUB_NOW + 0.6 * HOUR, likelyAt: STUB_NOW + likely * HOUR, safeAt: STUB_NOW + safe * HOUR },
    driedOut:
      coatsOn === 0 || state === 'unknown' || state === 'dried out' || state === 'ready for burnout' || state === 'released'
        ? null
        : state === 'last coat on'
          ? { earliestAt: null, likelyAt: STUB_NOW + 14 * HOUR, safeAt: STUB_NOW + 19 * HOUR }
          : { earliestAt: null, likelyAt: STUB_NOW + 38 * HOUR, safeAt: STUB_NOW + 58 * HOUR },
    isUncalibrated: false,
    pourDate: null,
    willMissPour: false,
    hold: null,
    look: null,
    warnings: [],
    ...over,
  }
}

const hold = (n: number, reason: string) => ({ id: uuid('d', n), reason, by: 'Halvard', at: STUB_NOW - 26 * HOUR })

export function stubTrees(): QueueTree[] {
  const scene = stubScene()
  if (scene === 'empty') return []
  const usual: QueueTree[] = [
    tree(1, 'T-108', 'Tide Bell', 'ready for burnout', { pourDate: '2026-10-16' }),
    tree(2, 'T-109', 'Kelp Bowl, 2 pieces', 'ready for burnout', { pourDate: '2026-10-16' }),
    tree(3, 'T-111', 'Gull on a Post II', 'ready for burnout', { pourDate: '2026-10-20', isUncalibrated: true }),
    tree(4, 'T-112', 'Hare, Listening', 'dried out', {
      pourDate: '2026-10-16',
      warnings: [{ code: 'damp in store', level: 'warn', text: 'Dried out, but the room has been damp for 12 h since: weigh, warm or confirm it before release.' }],
    }),
    tree(5, 'T-113', 'Lifeboat Crew, relief', 'dried out', { pourDate: '2026-10-16' }),
    tree(6, 'T-114', 'The Netmender', 'held', { pourDate: '2026-10-16', willMissPour: true, hold: hold(1, 'Crack at the cup. Patch, then ask Ines.'), coatsOn: 6 }),
    tree(7, 'T-115', 'Otter Gate, panel 3', 'last coat on', { pourDate: '2026-10-20' }),
    tree(8, 'T-117', 'Cormorant, Wings Out', 'last coat on', {
      pourDate: '2026-10-14',
      dry: { earliestAt: null, likelyAt: STUB_NOW + 14 * HOUR, safeAt: STUB_NOW + 19 * HOUR },
    }),
    tree(9, 'T-118', 'Swimmer at Rest', 'overdue', {
      pourDate: '2026-10-16',
      willMissPour: true,
      warnings: [
        { code: 'overdue', level: 'warn', text: 'Coat 5 has hung 73 h, longest wait 72 h: over-dry coats powder and lift. Look it over before the dip.' },
        { code: 'pour at risk', level: 'warn', text: 'It will miss its pour date as things stand.' },
      ],
    }),
    tree(10, 'T-119', 'Otter Gate, panel 1', 'waiting', { pourDate: '2026-10-20' }),
    tree(11, 'T-120', 'Ram’s Fleece', 'dip now', { pourDate: '2026-10-20' }),
    tree(12, 'T-121', 'Three Hares', 'nearly dry', { pourDate: '2026-10-20' }),
    tree(13, 'T-122', 'Otter Gate, panel 2', 'drying', {
      pourDate: '2026-10-16',
      isUncalibrated: true,
      driedOut: { earliestAt: null, likelyAt: Date.parse('2026-10-15T05:10Z'), safeAt: Date.parse('2026-10-16T08:00Z') },
      warnings: [
        { code: 'still wet', level: 'warn', text: 'Coat 5 is still wet: 17 % of its water left. Dip at 10 % or less. A coat dipped wet can lift off the wax.' },
        { code: 'swing', level: 'warn', text: 'The room has moved 2.1 K down since the dip, limit 1.7 K: coat 5 can lift. Hold the temperature.' },
      ],
    }),
    tree(14, 'T-123', 'Standing Figure in a Very Long Coat, upper half with both arms', 'wet', { coats: LONG_COATS, coatsOn: 6, pourDate: '2026-10-27' }),
    tree(15, 'T-124', 'Wren', 'unknown', { pourDate: '2026-10-20', warnings: [{ code: 'unknown', level: 'warn', text: 'No reading tells how the air was: confirm by touch, weight or temperature before the next act.' }] }),
    tree(16, 'T-125', 'Kelp Bowl, 3 pieces', 'wax ready', { stateSince: STUB_NOW - HOUR }),
    tree(17, 'T-126', 'Ammonite', 'bare wax', {
      warnings: [{ code: 'intake open', level: 'warn', text: 'The wax has not passed intake yet.' }],
    }),
    tree(18, 'T-104', 'Wave Study', 'released', { stateSince: STUB_NOW - 30 * HOUR }),
    tree(19, 'T-106', 'Crab Pot', 'released', { stateSince: STUB_NOW - 31 * HOUR }),
    tree(20, 'T-101', 'Broken Oar', 'scrapped', { stateSince: STUB_NOW - 200 * HOUR }),
  ]
  if (scene !== 'full') return usual
  const states = usual.map((entry) => entry.state)
  return [
    ...usual,
    ...Array.from({ length: 180 }, (_, index) => {
      const state = states[index % states.length]!
      return tree(100 + index, `T-${200 + index}`, `Frieze, block ${index + 1} of 180`, state, {
        pourDate: index % 3 === 0 ? '2026-10-20' : null,
        ...(state === 'held' ? { hold: hold(100 + index, 'Waiting for the sculptor’s word on the seam, and for a longer sentence than usual to see it wrap.') } : {}),
      })
    }),
  ]
}

export function stubDetail(tag: string): TreeDetail | null {
  const found = stubTrees().find((entry) => entry.tag === tag)
  if (!found) return null
  const dipTimes = ['2026-10-09T09:20Z', '2026-10-09T15:05Z', '2026-10-10T08:15Z', '2026-10-12T07:10Z', '2026-10-13T09:55Z', '2026-10-13T10:05Z', '2026-10-13T10:15Z', '2026-10-13T10:25Z']
  const people = ['Maud', 'Maud', 'Halvard', 'Wren', 'Maud', 'Oona', 'Oona', 'Oona']
  const rows: CoatRow[] = found.coats.map((coat, index) => {
    const number = index + 1
    const isOn = number <= found.coatsOn
    const dippedAt = Date.parse(dipTimes[index] ?? '2026-10-13T10:30Z')
    const nextAt = number < found.coatsOn ? Date.parse(dipTimes[index + 1] ?? '2026-10-13T11:00Z') : STUB_NOW
    return {
      number,
      kind: coat.kind,
      stucco: coat.stucco,
      bathName: coat.kind === 'face' ? 'Face' : 'Backup',
      isNewest: number === found.coatsOn,
      on: isOn
        ? {
            coatId: uuid('c', number),
            way: number === 3 ? 'two halves' : number === 1 ? 'poured' : 'dip',
            dippedAt,
            roughMinutes: number === 4 ? 10 : 0,
            by: people[index] ?? 'Oona',
            placeName: number < 3 ? 'Rack A 2' : 'Rack B 5',
            drainSeconds: number < 3 ? 60 : 45,
            airTempC: number === 2 ? null : 21.4 + index * 0.1,
            relHumidityPct: number === 2 ? null : 58 - index,
            meanRelHumidityPct: number === 2 ? null : 57,
            worstRelHumidityPct: number === 2 ? null : 69,
            dryingMs: nextAt - dippedAt,
            moistureRatio: number === found.coatsOn ? found.moistureRatio : 0.02 + index * 0.01,
            isCovered: number < found.coatsOn,
            forecast: { p10At: dippedAt + 4 * HOUR, p50At: dippedAt + 5.5 * HOUR, p90At: dippedAt + 6.4 * HOUR },
            deviations: number === 4 ? ['medium stucco instead of coarse', 'dipped at 14 % of its water left'] : [],
            reason: number === 4 ? 'Coarse sander down, Ines agreed' : null,
            looks: number === 4 ? [{ verdict: 'looks dry' as const, by: 'Wren', at: dippedAt + 5 * HOUR, moistureRatio: 0.11 }] : [],
          }
        : null,
      planned: isOn
        ? null
        : {
            likelyAt: found.driedOut === null ? null : STUB_NOW + (70 / 60 + (number - found.coatsOn - 1) * 16) * HOUR,
            safeAt: found.driedOut === null ? null : STUB_NOW + (2 + (number - found.coatsOn - 1) * 17) * HOUR,
          },
    }
  })
  const start = STUB_NOW - 4.25 * HOUR
  const isLong = found.state === 'last coat on'
  const end = isLong ? STUB_NOW + 22 * HOUR : STUB_NOW + 3.3 * HOUR
  const k = isLong ? 0.28 : found.state === 'wet' ? 0.08 : 0.417
  const points = Array.from({ length: 120 }, (_, index) => {
    const at = start + ((end - start) * index) / 119
    const t = (at - start) / HOUR
    const f = (rate: number) => 100 * Math.exp(-((rate * t) ** 1.1))
    const spread = at < STUB_NOW ? 0.02 : 0.02 + (at - STUB_NOW) / HOUR / (isLong ? 60 : 14)
    return { at, likelyPct: f(k), lowPct: f(k * (1 + spread)), highPct: f(k * (1 - spread)), isForecast: at > STUB_NOW }
  })
  const hasCurve = found.coatsOn > 0 && !['released', 'scrapped', 'unknown'].includes(found.state)
  const isBusy = found.tag === 'T-122'
  return {
    tree: found,
    recipe: { versionId: uuid('f', 1), name: found.coats.length > 8 ? 'Bronze 14, large' : 'Bronze 8', version: 3, isCalibrated: !found.isUncalibrated },
    waxMassKg: 3.2,
    cupKind: 'paper',
    cupVolumeL: 0.35,
    recessClass: isBusy ? 'deep recess' : 'none',
    spacing: 'open',
    hungMassKg: isBusy ? 23.6 : null,
    createdAt: Date.parse('2026-10-08T10:00Z'),
    createdBy: 'Oona',
    pieces: [{ id: uuid('9', 1), workTitle: 'Otter Gate', sectionName: 'panel 2', editionNumber: 1, isRecast: false }],
    intake: {
      waxSurface: found.state === 'bare wax' ? null : 'washed',
      isWaxAtRoomTemp: true,
      isCupFirm: found.state !== 'bare wax',
      areVentsAndCorePinsIn: found.state !== 'bare wax',
      passedAt: found.state === 'bare wax' ? null : Date.parse('2026-10-08T15:00Z'),
      passedBy: found.state === 'bare wax' ? null : 'Ines',
    },
    coats: rows.toReversed(),
    curve: hasCurve ? { points, targetPct: found.openTarget === 0.95 ? 5 : 10, likelyAt: found.dry?.likelyAt ?? null, safeAt: found.dry?.safeAt ?? null } : null,
    climate: hasCurve
      ? Array.from({ length: 60 }, (_, index) => ({
          at: start + ((STUB_NOW - start) * index) / 59,
          airTempC: 21.4 + Math.sin(index / 6) * 0.3 + index / 150,
          relHumidityPct: 57 + Math.cos(index / 5) * 1.5,
        }))
      : [],
    holds: [
      ...(found.hold ? [{ ...found.hold, liftedBy: null, liftedAt: null, liftReason: null }] : []),
      ...(isBusy
        ? [{ id: uuid('d', 9), reason: 'Hairline at the lower rail', by: 'Halvard', at: Date.parse('2026-10-10T08:40Z'), liftedBy: 'Ines', liftedAt: Date.parse('2026-10-10T10:00Z'), liftReason: 'Patched and closed' }]
        : []),
    ],
    lookOvers:
      found.state === 'ready for burnout' || found.state === 'released' || isBusy
        ? [{ id: uuid('8', 1), note: isBusy ? 'Cup edge clean, no bridging in the scrolls' : '', by: 'Ines', at: STUB_NOW - 18 * HOUR, coatNumber: isBusy ? 4 : 8 }]
        : [],
    release: found.state === 'released' ? { by: 'Ines', at: STUB_NOW - 30 * HOUR, confirmedBy: 'weight' } : null,
    history: Array.from({ length: isBusy ? 30 : 6 }, (_, index) => ({
      id: index,
      at: STUB_NOW - (index * 5 + 4.25) * HOUR,
      by: people[index % people.length]!,
      text: index % 3 === 0 ? `Coat ${Math.max(1, 5 - index)} dipped.` : index % 3 === 1 ? `Coat ${Math.max(1, 5 - index)} looks dry.` : 'Moved to Rack B 5.',
    })),
    isWatched: false,
    takeBack: isBusy ? { coatId: uuid('c', 5), kind: 'with reason', until: null } : found.tag === 'T-121' ? { coatId: uuid('c', 5), kind: 'own', until: STUB_NOW + 6 * 60_000 } : null,
  }
}
