/**
 * Colour and line type of entities and layers. Codes: 62 a colour by number (0 by block, 256 by layer, negative: its layer is
 * off), 420 a colour of 24 bits that wins over it, 6 the name of a line type.
 *
 * Source: DXF reference, releases 12 to 2018, "Common group codes for entities" and LAYER.
 */
import type { DxfRecords } from './dxf-records.ts'

const byLayer = 256

/** "1" to "255" or "#rrggbb"; "0": by the block it is in; null: by its layer. */
export function colourOf(record: DxfRecords): string | null {
  // A colour that is no number draws nothing wrong: it is by layer then.
  const before = record.problem
  const bits = record.find(420)
  const value = bits >= 0 ? record.integerAt(bits) : record.integer(62, byLayer)
  if (record.problem !== before) {
    record.problem = before
    return null
  }
  if (bits >= 0) return `#${(value & 0xffffff).toString(16).padStart(6, '0')}`
  return value === byLayer ? null : String(Math.abs(value))
}

/** In capitals; "BYBLOCK": by the block it is in; null: by its layer. */
export function lineTypeOf(record: DxfRecords): string | null {
  const name = record.find(6) < 0 ? '' : record.word(6).toUpperCase()
  return name === '' || name === 'BYLAYER' ? null : name
}

/** Names of the first seven colours by their numbers; the seventh is drawn black on white. */
const colourNames: Readonly<Record<string, string>> = { red: '1', yellow: '2', green: '3', cyan: '4', blue: '5', magenta: '6', white: '7', black: '7' }

/** A colour as people name it ("red", "3", "#ff8000"), as looks have it; null where it is none. */
export function namedColour(word: string): string | null {
  const plain = word.trim().toLowerCase()
  const named = colourNames[plain]
  if (named !== undefined) return named
  if (/^#[0-9a-f]{6}$/.test(plain)) return plain
  return /^\d{1,3}$/.test(plain) && Number(plain) >= 1 && Number(plain) <= 255 ? String(Number(plain)) : null
}
