/**
 * Bytes to text, by what the bytes say: a byte order mark, else UTF-8 where it is valid, else the encoding that the
 * file names in its head ($DWGCODEPAGE of a DXF, `encoding` of an XML declaration), else Windows-1252. Line ends become
 * one line feed, whatever they were, so that line numbers in sentences are those of an editor.
 *
 * Source: WHATWG Encoding Standard (labels and decoders); DXF reference, HEADER section ($DWGCODEPAGE).
 */
import { fail, ok, type Result } from '../base/result.ts'
import type { Source } from './format.ts'

/** Bytes of the head in which an encoding may be named, and that are looked at for control characters. */
const headBytes = 1 << 16

/** Share of control characters in the head beyond which a file is no text: none of our formats has any to speak of. */
const controlShare = 0.02

/** Code pages in which two bytes make a character. Chance makes some of their names valid UTF-8, so they are believed. */
const doubleByte = new Set(['shift_jis', 'gbk', 'gb18030', 'euc-kr', 'big5'])

/** The first release whose text is UTF-8 whatever its code page says (2007). */
const firstUtf8Release = 1021

/** Text with line feeds only, without a byte order mark. Fails with "binary" where the bytes are no text. */
export function decodedText(source: Source): Result<string> {
  const { bytes } = source
  const marked = byteOrderMark(bytes)
  if (marked !== null) return ok(evenLines(decoded(bytes.subarray(marked.skip), marked.label)))
  const head = bytes.subarray(0, headBytes)
  const wide = utf16WithoutMark(head)
  if (wide !== null) return ok(evenLines(decoded(bytes, wide)))
  if (looksBinary(head)) {
    return fail('binary', 'the file is binary, not text', { file: source.name }, 'save the drawing as DXF 2018 ASCII, OBJ, SVG or GeoJSON')
  }
  const named = namedEncoding(head)
  const believed = named !== null && named.beforeUtf8 && doubleByte.has(named.label)
  const text = believed ? strictly(bytes, named.label) : strictly(bytes, 'utf-8')
  return ok(evenLines(text ?? decoded(bytes, named?.label ?? 'windows-1252')))
}

function byteOrderMark(bytes: Uint8Array): { label: string; skip: number } | null {
  if (bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf) return { label: 'utf-8', skip: 3 }
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return { label: 'utf-16le', skip: 2 }
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return { label: 'utf-16be', skip: 2 }
  return null
}

/** All our formats begin in ASCII, so UTF-16 shows as zeros in every other byte of the first words. */
function utf16WithoutMark(head: Uint8Array): string | null {
  const pairs = Math.min(16, head.length >> 1)
  if (pairs < 2) return null
  let even = 0
  let odd = 0
  for (let i = 0; i < pairs; i += 1) {
    if (head[2 * i] === 0) even += 1
    if (head[2 * i + 1] === 0) odd += 1
  }
  if (odd === pairs && even === 0) return 'utf-16le'
  if (even === pairs && odd === 0) return 'utf-16be'
  return null
}

function looksBinary(head: Uint8Array): boolean {
  let control = 0
  for (const byte of head) {
    if (byte === 0) return true
    if (byte < 9 || (byte > 13 && byte < 32 && byte !== 26 && byte !== 27) || byte === 127) control += 1
  }
  return control > controlShare * head.length
}

/** The encoding that the head names, as a label of the Encoding Standard; null when it names none that can be decoded. */
function namedEncoding(head: Uint8Array): { label: string; beforeUtf8: boolean } | null {
  const ascii = decoded(head, 'windows-1252')
  const page = /\$DWGCODEPAGE\s+3\s+(\S+)/i.exec(ascii)?.[1]
  const declared = /^\s*<\?xml[^>]*\bencoding\s*=\s*["']([\w.:-]+)["']/.exec(ascii)?.[1]?.toLowerCase() ?? null
  const label = page === undefined ? declared : codePage(page)
  if (label === null) return null
  try {
    new TextDecoder(label)
  } catch {
    return null
  }
  const release = Number(/\$ACADVER\s+1\s+AC(\d{4})/.exec(ascii)?.[1] ?? firstUtf8Release)
  return { label, beforeUtf8: release < firstUtf8Release }
}

const codePages: Readonly<Record<string, string>> = {
  874: 'windows-874', 932: 'shift_jis', 936: 'gbk', 949: 'euc-kr', 950: 'big5', 866: 'ibm866',
  utf8: 'utf-8', 'utf-8': 'utf-8', gb2312: 'gbk', big5: 'big5',
}

/** "ANSI_1252" as "windows-1252". DOS pages other than 866 have no decoder; only names can suffer, never numbers. */
function codePage(name: string): string | null {
  const number = name.toLowerCase().replace(/^(ansi|dos|cp|windows)[_-]?/, '')
  return /^125[0-8]$/.test(number) ? `windows-${number}` : (codePages[number] ?? null)
}

/** Null where the bytes are not valid in this encoding. */
function strictly(bytes: Uint8Array, label: string): string | null {
  try {
    return new TextDecoder(label, { fatal: true, ignoreBOM: true }).decode(bytes)
  } catch {
    return null
  }
}

const decoded = (bytes: Uint8Array, label: string): string => new TextDecoder(label, { ignoreBOM: true }).decode(bytes)

const evenLines = (text: string): string => (text.includes('\r') ? text.replace(/\r\n?/g, '\n') : text)
