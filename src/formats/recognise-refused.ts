/** Files that are known by their first bytes and not read: named, with the way out. */
import { fail, type Problem } from '../base/result.ts'
import type { Source } from './format.ts'

const saveAsDxf = 'save the drawing as DXF 2018 ASCII'

interface Signature {
  readonly code: string
  readonly head: RegExp
  readonly message: string
  readonly cure: string
}

/** Signatures as the formats' own specifications give them; the head is read byte by byte (Latin-1). */
const signatures: readonly Signature[] = [
  { code: 'binary-dxf', head: /^AutoCAD Binary DXF/, message: 'this is a binary DXF, which is not read', cure: saveAsDxf },
  { code: 'dwg', head: /^(AC10\d\d|AC1\.\d|AC2\.\d|MC0\.0)/, message: 'this is a DWG, which is not read', cure: saveAsDxf },
  { code: 'pdf', head: /^%PDF-/, message: 'this is a PDF, which is not read', cure: `${saveAsDxf}, or as SVG` },
  { code: 'zip', head: /^PK(\x03\x04|\x05\x06)/, message: 'this is a ZIP archive, which is not read', cure: 'unpack it first' },
  { code: 'gzip', head: /^\x1f\x8b/, message: 'this is a gzip archive, which is not read', cure: 'unpack it first' },
  {
    code: 'picture', head: /^(\x89PNG|\xff\xd8\xff|GIF8|BM..\0\0|II\*\0|MM\0\*)/s,
    message: 'this is a picture made of pixels, not a drawing', cure: saveAsDxf,
  },
  { code: 'step', head: /^\s*ISO-10303-21;/, message: 'this is a STEP file, which is not read', cure: `${saveAsDxf}, or as OBJ` },
]

/** The problem of a file that is known and not read, or null. */
export function refused(source: Source): Problem | null {
  const head = String.fromCharCode(...source.bytes.subarray(0, 64))
  for (const { code, head: pattern, message, cure } of signatures) {
    if (pattern.test(head)) return fail(code, message, { file: source.name }, cure).problem
  }
  return null
}
