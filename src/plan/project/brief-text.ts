/** Briefs as text: what reads back as the same brief, with no field that says nothing. */
import { briefVersion, type Brief } from './brief.ts'
import type { At, Condition } from './condition.ts'
import { documentText } from './document-text.ts'
import { writtenLines } from './lines-wish.ts'

/** The text of a brief file. */
export function briefText(brief: Brief): string {
  return documentText(writtenBrief(brief))
}

/** The brief as its file says it, a value for JSON. */
export function writtenBrief({ unit, datum, rise, down, shape, flat_mm, voids, lines, cures, keeps, conditions }: Brief): object {
  return {
    panewise: 'brief', version: briefVersion,
    ...said({ unit, datum, rise, down: down ? true : null, shape, flat_mm, voids, lines: lines === undefined || lines === null ? null : writtenLines(lines), cures, keeps }),
    ...(conditions.length === 0 ? {} : { conditions: conditions.map(writtenCondition) }),
  }
}

function writtenCondition({ name, kind, at, soft, off, ...fields }: Condition): object {
  return { name, kind, at: writtenPlace(at), ...said({ ...fields, soft, off: off === true ? true : null }) }
}

function writtenPlace(at: At): object {
  if (!('rim' in at)) return at
  return { rim: at.rim === 'outer' ? 'outer' : `void:${at.rim[0]},${at.rim[1]}` }
}

/** The fields that are not null. */
function said(fields: Readonly<Record<string, unknown>>): object {
  return Object.fromEntries(Object.entries(fields).filter(([, value]) => value !== null && value !== undefined))
}
