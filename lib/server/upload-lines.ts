import { open, type FileHandle } from 'node:fs/promises'
import { parse } from 'csv-parse/sync'
import type { Delimiter, Encoding } from '@/lib/uploads/upload-settings'

/** One line of a file. `number` counts from 1, `end` is the byte behind its line end, `cells` is null when it cannot be split. */
export type FileLine = { number: number; end: number; cells: string[] | null }
type TextLine = Omit<FileLine, 'cells'> & { text: string | null }

export type ReadingOf = { encoding: Encoding; delimiter: Delimiter }
/** A place between two lines. */
export type FilePlace = { bytes: number; lines: number }

const BLOCK_BYTES = 64 * 1024
/** A line that is longer is no row of a logger. */
const LONGEST_LINE_BYTES = 16 * 1024
const MOST_CELLS = 200

const NODE_ENCODINGS = { 'utf-8': 'utf8', 'utf-16le': 'utf16le', latin1: 'latin1' } as const

/** Byte behind the next line end at or after `from`; -1 where there is none. Two-byte letters are looked at in pairs. */
function lineEnd(bytes: Buffer, from: number, encoding: Encoding): number {
  if (encoding !== 'utf-16le') {
    const at = bytes.indexOf(0x0a, from)
    return at < 0 ? -1 : at + 1
  }
  for (let at = bytes.indexOf(0x0a, from); at >= 0; at = bytes.indexOf(0x0a, at + 1)) {
    if ((at - from) % 2 === 0 && at + 1 < bytes.length && bytes[at + 1] === 0) return at + 2
  }
  return -1
}

function textOf(bytes: Buffer, from: number, to: number, encoding: Encoding): string {
  return bytes
    .toString(NODE_ENCODINGS[encoding], from, to)
    .replace(/^\uFEFF/, '')
    .replace(/\r?\n$|\r$/, '')
}

/**
 * Splits lines into cells. A line with an open quotation mark would take the lines after it into its last cell, so where the counts
 * differ each line is split by itself, and only the damaged one is lost.
 */
export function cellsOf(texts: readonly string[], delimiter: Delimiter): (string[] | null)[] {
  const all = split(texts, delimiter)
  return all?.length === texts.length ? all : texts.map((text) => split([text], delimiter)?.[0] ?? null)
}

function split(texts: readonly string[], delimiter: Delimiter): string[][] | null {
  try {
    return parse(texts.map((text) => (text === '' ? ' ' : text)).join('\n'), {
      delimiter,
      relax_quotes: true,
      relax_column_count: true,
      record_delimiter: '\n',
    })
  } catch {
    return null
  }
}

/**
 * The lines of a file from a place on, one block of them at a time, never the whole file in memory. A resumed reader begins where
 * another one ended.
 *
 * @param from the start of the file, or the end of a line that this function gave.
 */
export async function* readFileLines(
  file: string,
  { encoding, delimiter }: ReadingOf,
  from: FilePlace = { bytes: 0, lines: 0 },
): AsyncGenerator<FileLine[]> {
  const handle = await open(file, 'r')
  try {
    for await (const lines of textLines(handle, encoding, from)) yield withCells(lines, delimiter)
  } finally {
    await handle.close()
  }
}

function withCells(lines: readonly TextLine[], delimiter: Delimiter): FileLine[] {
  const whole = lines.filter((line): line is TextLine & { text: string } => line.text !== null)
  const cells = cellsOf(
    whole.map(({ text }) => text),
    delimiter,
  )
  let index = 0
  return lines.map(({ text, number, end }) => {
    const own = text === null ? null : (cells[index++] ?? null)
    return { number, end, cells: own && own.length > MOST_CELLS ? own.slice(0, MOST_CELLS) : own }
  })
}

async function* textLines(handle: FileHandle, encoding: Encoding, from: FilePlace): AsyncGenerator<TextLine[]> {
  let { bytes: position, lines: number } = from
  let rest: Buffer = Buffer.alloc(0)
  let isSkipping = false
  for (;;) {
    const { bytesRead, buffer } = await handle.read(Buffer.alloc(BLOCK_BYTES), 0, BLOCK_BYTES, position + rest.length)
    const bytes = Buffer.concat([rest, buffer.subarray(0, bytesRead)])
    const lines: TextLine[] = []
    let start = 0
    for (let end = lineEnd(bytes, start, encoding); end >= 0; end = lineEnd(bytes, start, encoding)) {
      const isTooLong = isSkipping || end - start > LONGEST_LINE_BYTES
      lines.push({ number: (number += 1), end: position + end, text: isTooLong ? null : textOf(bytes, start, end, encoding) })
      isSkipping = false
      start = end
    }
    if (bytesRead === 0 && (start < bytes.length || isSkipping)) {
      // The last line, without an end of its own.
      lines.push({
        number: number + 1,
        end: position + bytes.length,
        text: isSkipping ? null : textOf(bytes, start, bytes.length, encoding),
      })
    }
    if (lines.length > 0) yield lines
    if (bytesRead === 0) return
    // Of a line without an end only its length is kept.
    const unended = bytes.length - start
    if (unended > LONGEST_LINE_BYTES) isSkipping = true
    // An odd byte stays, so that pairs stay pairs.
    const kept = isSkipping ? (encoding === 'utf-16le' ? unended % 2 : 0) : unended
    position += bytes.length - kept
    rest = bytes.subarray(bytes.length - kept)
  }
}

export type FileSample = {
  /** The first lines as text: what is looked at before anybody knows the delimiter. */
  head: string[]
  /** Whole lines from all over the file behind them, in order. */
  spread: string[]
}

const HEAD_BYTES = 128 * 1024
const SPREAD_PLACES = 24
const SPREAD_BYTES = 4 * 1024
const LINES_OF_A_PLACE = 12

/** The first bytes of a file, to tell its encoding. */
export async function readHead(file: string): Promise<Buffer> {
  const handle = await open(file, 'r')
  try {
    return await readAt(handle, 0, HEAD_BYTES)
  } finally {
    await handle.close()
  }
}

async function readAt(handle: FileHandle, position: number, length: number): Promise<Buffer> {
  const { bytesRead, buffer } = await handle.read(Buffer.alloc(length), 0, length, position)
  return buffer.subarray(0, bytesRead)
}

/** The first lines of a file, and some from all over it: a form of dates shows itself only where a day is past the twelfth. */
export async function sampleFile(file: string, encoding: Encoding): Promise<FileSample> {
  const handle = await open(file, 'r')
  try {
    const { size } = await handle.stat()
    const head = wholeLines(await readAt(handle, 0, HEAD_BYTES), encoding, { isStart: true, isEnd: size <= HEAD_BYTES })
    const spread: string[] = []
    const places = size > HEAD_BYTES ? SPREAD_PLACES : 0
    for (let place = 1; place <= places; place += 1) {
      const position = Math.floor(HEAD_BYTES + ((size - HEAD_BYTES - SPREAD_BYTES) * place) / SPREAD_PLACES)
      // Pairs of bytes begin at even places.
      const bytes = await readAt(handle, Math.max(0, position - (position % 2)), SPREAD_BYTES)
      spread.push(...wholeLines(bytes, encoding, { isStart: false, isEnd: false }).slice(0, LINES_OF_A_PLACE))
    }
    return { head, spread }
  } finally {
    await handle.close()
  }
}

function wholeLines(bytes: Buffer, encoding: Encoding, { isStart, isEnd }: { isStart: boolean; isEnd: boolean }): string[] {
  const lines: string[] = []
  let start = isStart ? 0 : lineEnd(bytes, 0, encoding)
  if (start < 0) return []
  for (let end = lineEnd(bytes, start, encoding); end >= 0; end = lineEnd(bytes, start, encoding)) {
    lines.push(end - start > LONGEST_LINE_BYTES ? '' : textOf(bytes, start, end, encoding))
    start = end
  }
  if (isEnd && start < bytes.length && bytes.length - start <= LONGEST_LINE_BYTES) lines.push(textOf(bytes, start, bytes.length, encoding))
  return lines
}
