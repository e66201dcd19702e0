import { readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { decodedText } from '../../src/formats/text-encoding.ts'
import { bytesOf, drawingOf, sentenceOf } from './text-read.ts'

const square = 'v 0 0\nv 1 0\nv 1 1\nv 0 1\ng Gläser Стекло\nf 1 2 3 4\n'

function utf16(text: string, little: boolean, mark: boolean): Uint8Array {
  const units = mark ? `\ufeff${text}` : text
  const bytes = new Uint8Array(2 * units.length)
  const view = new DataView(bytes.buffer)
  for (let i = 0; i < units.length; i += 1) view.setUint16(2 * i, units.charCodeAt(i), little)
  return bytes
}

/** A release-2000 file that states a code page, with one line on the layer. */
const dxfOn = (layer: string, page: string): string =>
  `0\nSECTION\n2\nHEADER\n9\n$ACADVER\n1\nAC1015\n9\n$DWGCODEPAGE\n3\n${page}\n0\nENDSEC\n` +
  `0\nSECTION\n2\nENTITIES\n0\nLINE\n8\n${layer}\n10\n0\n20\n0\n11\n1\n21\n0\n0\nENDSEC\n0\nEOF\n`

const decoded = (bytes: Uint8Array): string => {
  const text = decodedText({ name: 'x', bytes })
  if (!text.ok) throw new Error(text.problem.message)
  return text.value
}

describe('encodings', () => {
  test.each([
    ['UTF-8', bytesOf(square)],
    ['UTF-8 with mark', bytesOf(`\ufeff${square}`)],
    ['UTF-16 LE', utf16(square, true, true)],
    ['UTF-16 BE', utf16(square, false, true)],
    ['UTF-16 LE without mark', utf16(square, true, false)],
    ['UTF-16 BE without mark', utf16(square, false, false)],
  ])('%s', (_, bytes) => {
    expect(decoded(bytes)).toBe(square)
    expect(drawingOf(bytes, 'a.obj').layers).toContain('Gläser Стекло')
  })

  test.each([['\r\n'], ['\r'], ['\n']])('line ends %j', (end) => {
    expect(decoded(bytesOf(square.replaceAll('\n', end)))).toBe(square)
    expect(sentenceOf(bytesOf('v 0 0\nv 1 0\nv x 1\n'.replaceAll('\n', end)), 'a.obj')).toBe(
      'a.obj, line 3: "x" is not a number; export the file again.',
    )
  })

  // The files of these were written by a DXF library, in the code page that they state.
  test.each([
    ['cp1251', 'Стекло'],
    ['cp932', '硝子屋根'],
    ['gbk', '联通'],
    ['cp1253', 'γυαλί'],
  ])('a DXF in code page %s', (page, layer) => {
    const bytes = readFileSync(`test/corpus/dxf/code-page-${page}.dxf`)
    expect(drawingOf(bytes).layers).toEqual([layer])
    expect(drawingOf(bytes, 'plan.dxf', { layers: [layer] }).segmentLayer).toHaveLength(1)
  })

  test('UTF-8 in a file that states a code page all the same', () => {
    const text = dxfOn('Träger', 'ANSI_1252')
    expect(drawingOf(text).layers).toEqual(['Träger'])
    expect(drawingOf(Uint8Array.from(text, (c) => c.charCodeAt(0))).layers).toEqual(['Träger'])
  })

  test('an encoding that nobody decodes costs names only', () => {
    const text = dxfOn('\xe9', 'ANSI_1361')
    expect(drawingOf(Uint8Array.from(text, (c) => c.charCodeAt(0))).segmentLayer).toHaveLength(1)
  })

  test('an XML declaration names its encoding', () => {
    expect(decoded(Uint8Array.from('<?xml version="1.0" encoding="ISO-8859-1"?><a>\xe4</a>', (c) => c.charCodeAt(0)))).toContain('ä')
  })
})

describe('what is no text', () => {
  const cases: [string, Uint8Array, RegExp][] = [
    ['nothing', new Uint8Array(0), /the file is empty; export it again/],
    ['blanks', bytesOf(' \n\r\n\t '), /nothing but blank space/],
    ['binary DXF', bytesOf('AutoCAD Binary DXF\r\n\u001a\u0000\u0000SECTION'), /binary DXF.*save the drawing as DXF 2018 ASCII/],
    ['DWG', bytesOf('AC1032\u0000\u0000\u0000\u0000'), /this is a DWG.*save the drawing as DXF 2018 ASCII/],
    ['old DWG', bytesOf('AC1.50\u0000\u0000'), /this is a DWG/],
    ['PDF', bytesOf('%PDF-1.7\n'), /this is a PDF/],
    ['ZIP', Uint8Array.of(80, 75, 3, 4, 0, 0), /ZIP archive.*unpack it first/],
    ['PNG', Uint8Array.of(0x89, 80, 78, 71, 13, 10, 26, 10), /made of pixels/],
    ['zeros', new Uint8Array(1000), /the file is binary, not text/],
    ['noise', Uint8Array.from({ length: 1000 }, (_, i) => 1 + ((i * 7919) % 31)), /the file is binary, not text/],
    ['prose', bytesOf('Once upon a time there was a roof.'), /of no format that is read; give a plan as DXF/],
  ]
  test.each(cases)('%s', (_, bytes, expected) => {
    const said = sentenceOf(bytes, 'plan.xyz')
    expect(said).toMatch(expected)
    expect(said.startsWith('plan.xyz: ')).toBe(true)
  })
})

describe('content before name', () => {
  test('an OBJ called .dxf, and the other way round', () => {
    expect(drawingOf(square, 'plan.dxf').format).toBe('OBJ')
    expect(drawingOf(readFileSync('test/corpus/dxf/cells-lines.dxf'), 'plan.obj').format).toBe('DXF')
    expect(drawingOf(square, '-').format).toBe('OBJ')
  })

  test('comments before the first statement', () => {
    expect(drawingOf(`999\nwritten by hand\n${readFileSync('test/corpus/dxf/curves.dxf', 'latin1')}`, '-').format).toBe('DXF')
    expect(drawingOf(`# made by hand\n\n  # again\n${square}`, '-').format).toBe('OBJ')
  })

  test('the name decides where the content fits nothing', () => {
    expect(sentenceOf('hello world', 'plan.obj')).toMatch(/^plan.obj: the file has no faces \(f\) and no lines \(l\)/)
    expect(sentenceOf('hello world', 'plan.DXF')).toMatch(/^plan.DXF, line 1: "hello world" stands where a group code should be/)
  })
})
