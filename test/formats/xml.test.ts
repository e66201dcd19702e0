/** XML: what is well formed, what is refused, and that nothing is ever expanded. */
import { expect, test } from 'vitest'
import { finish } from '../../src/base/steps.ts'
import { attribute, xmlTree, type XmlElement } from '../../src/formats/xml.ts'

const read = (text: string) => finish(xmlTree(text, { keepsText: ['note'], keptSpace: { prefix: 'k', uri: 'urn:kept' } }))

function root(text: string): XmlElement {
  const result = read(text)
  if (!result.ok) throw new Error(JSON.stringify(result.problem))
  return result.value
}

function refused(text: string): { code: string; message: string; line: number | undefined } {
  const result = read(text)
  if (result.ok) throw new Error('was read')
  return { code: result.problem.code, message: result.problem.message, line: result.problem.where?.line }
}

test('elements, attributes, lines, and the text that is asked for', () => {
  const tree = root(
    '<?xml version="1.0"?>\n<a x="1" y=\'&lt;&#65;&#x42;&amp;\'>\n<b/>text<note>one &gt; <![CDATA[<two>]]></note>\n<c>\n</c></a>',
  )
  expect([tree.name, tree.line, attribute(tree, 'x'), attribute(tree, 'y'), attribute(tree, 'z')]).toEqual(['a', 2, '1', '<AB&', null])
  expect(tree.children.map(({ name, line, text }) => [name, line, text])).toEqual([
    ['b', 3, ''],
    ['note', 3, 'one > <two>'],
    ['c', 4, ''],
  ])
})

test('namespaces: local names, and attributes of the one that is kept, whatever its prefix', () => {
  const tree = root('<p:a xmlns:p="urn:p" xmlns:q="urn:kept" xmlns:r="urn:r" q:v="1" r:v="2" v="3"><p:b k:v="4"/></p:a>')
  expect([tree.name, tree.space]).toEqual(['a', 'urn:p'])
  expect([attribute(tree, 'k:v'), attribute(tree, 'v')]).toEqual(['1', '3'])
  expect(attribute(tree.children[0]!, 'k:v')).toBe('4')
})

test('entities that multiply themselves are refused, not expanded', () => {
  // The "billion laughs" document (as described in CERT and Wikipedia articles on entity expansion): 10^9 words from 1 kB.
  let declarations = '<!ENTITY l0 "lol">'
  for (let i = 1; i < 10; i += 1) declarations += `<!ENTITY l${i} "${`&l${i - 1};`.repeat(10)}">`
  const before = process.memoryUsage().heapUsed
  expect(refused(`<?xml version="1.0"?><!DOCTYPE svg [${declarations}]><svg><text>&l9;</text></svg>`).code).toBe('xml-entities')
  expect(process.memoryUsage().heapUsed - before).toBeLessThan(50e6)
  for (const declaration of [
    '<!ENTITY a "b">',
    '<!ENTITY a SYSTEM "file:///etc/passwd">',
    '<!ENTITY % p SYSTEM "http://example.org/x.dtd"> %p;',
    '<!entity a "b">',
  ]) {
    expect(refused(`<!DOCTYPE a [${declaration}]><a/>`).code, declaration).toBe('xml-entities')
  }
  expect(refused('<a>\n&nbsp;</a>')).toEqual({
    code: 'xml-entities',
    message: 'an entity is used that XML does not define by itself',
    line: 2,
  })
  expect(refused('<a b="&hello;"/>').code).toBe('xml-entities')
})

test('a document type without entities is passed over, and what it names is not fetched', () => {
  expect(root('<!DOCTYPE svg PUBLIC "-//W3C//DTD SVG 1.1//EN" "http://www.w3.org/Graphics/SVG/1.1/DTD/svg11.dtd"><svg/>').name).toBe('svg')
  expect(root('<!DOCTYPE a SYSTEM "x.dtd" [<!ATTLIST a b CDATA "c">]><a/>').attributes).toEqual([])
})

test('what is not well formed is refused with its line', () => {
  const cases: [string, string, RegExp, number | undefined][] = [
    ['<a>\n<b>\n</a>', 'not-xml', /^a closing tag does not fit <b>, which line 2 opens/, 3],
    ['<a/>\n<b/>', 'not-xml', /only one root/, 2],
    ['<a/></b>', 'not-xml', /unmatched closing tag/, 1],
    ['<a>\n<b x="1" x="2"/></a>', 'not-xml', /duplicate attribute/, 2],
    ['<a b=1/>', 'not-xml', /unquoted attribute value/, 1],
    ['<a b="<"/>', 'not-xml', /disallowed character/, 1],
    ['<a><p:b/></a>', 'not-xml', /^the prefix "p:" is not declared/, 1],
    ['hello', 'not-xml', /text data outside of root/, 1],
    ['<a>\u0001</a>', 'not-xml', /disallowed character/, 1],
    ['<a>&#0;</a>', 'not-xml', /malformed character entity/, 1],
    ['<a>\n<b>\n', 'cut-off', /^the file ends inside <b>, which line 2 opens/, 3],
    ['<a>\n<b x="1', 'cut-off', /^the file ends inside <a>, which line 1 opens/, 2],
    ['<a', 'cut-off', /./, 1],
    ['<!-- a', 'cut-off', /./, 1],
    ['', 'cut-off', /./, 1],
    ['   ', 'cut-off', /./, 1],
  ]
  for (const [text, code, message, line] of cases) {
    const problem = refused(text)
    expect(problem, text).toMatchObject({ code, line })
    expect(problem.message, text).toMatch(message)
  }
})

test('depth and count have limits', () => {
  expect(root('<a>'.repeat(256) + '</a>'.repeat(256)).name).toBe('a')
  expect(refused('<a>'.repeat(257) + '</a>'.repeat(257)).code).toBe('too-deep')
  expect(refused('<a>'.repeat(1_000_000)).code).toBe('too-deep')
  expect(refused(`<a>${'<b/>'.repeat(1_000_000)}</a>`).code).toBe('too-large')
})

test('gives a turn about every 16,000 characters', () => {
  const steps = xmlTree(`<a>${'<b c="d"/>'.repeat(100_000)}</a>`, { keepsText: [], keptSpace: { prefix: 'k', uri: 'u' } })
  let turns = 0
  let last = 0
  for (let step = steps.next(); step.done !== true; step = steps.next()) {
    turns += 1
    expect(step.value.done).toBeGreaterThanOrEqual(last)
    last = step.value.done
  }
  expect(turns).toBeGreaterThan(50)
})
