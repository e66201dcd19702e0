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
