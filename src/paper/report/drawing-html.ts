/** The page about a drawing as HTML that needs nothing else: for a browser, and on A4 paper. */
import { escaped } from '../drawing/svg.ts'
import { faces, themes } from '../drawing/theme.ts'
import type { DrawingPage, PageEntry } from './drawing-page.ts'
import { printable } from './printable.ts'

const { ink, ink2, rule, hair, fault, faultWash } = themes.day

const style = `
@page { size: A4; margin: 12mm 14mm }
* { box-sizing: border-box }
body { margin: 0 auto; max-width: 182mm; padding: 6mm 0; background: #fff; color: ${ink}; font: 9.6pt/1.36 ${faces.text} }
h1 { margin: 0 0 1.2mm; font: 600 15pt/1.2 ${faces.pen}; overflow-wrap: anywhere }
h2 { margin: 3.4mm 0 0.8mm; padding-bottom: 0.4mm; border-bottom: 0.3mm solid ${rule}; font: 600 10.4pt/1.3 ${faces.pen}; break-after: avoid }
p { margin: 0 0 1mm }
svg { display: block; width: 100%; height: auto; margin: 1.5mm 0 0; border: 0.25mm solid ${hair} }
ol { margin: 0; padding: 0; list-style: none }
li { display: grid; grid-template-columns: 8mm 1fr auto; gap: 0 2mm; padding: 0.7mm 0; border-bottom: 0.2mm solid ${hair}; break-inside: avoid; overflow-wrap: anywhere }
li:last-child { border-bottom: 0 }
.n { width: 5.4mm; height: 5.4mm; border: 0.35mm solid ${fault}; border-radius: 50%; color: ${fault}; font-size: 8.4pt; font-weight: 600; line-height: 4.7mm; text-align: center }
.n.bare { border-color: transparent }
.place, .typed, .lead, footer { color: ${ink2}; font-size: 8.6pt }
.typed { font-family: ui-monospace, monospace; font-size: 7.8pt }
.boxes { align-self: start; white-space: nowrap; font-size: 8.6pt }
.boxes i { display: inline-block; width: 3mm; height: 3mm; margin: 0 1.2mm 0 1mm; border: 0.3mm solid ${ink}; vertical-align: -0.4mm }
.ask li { background: ${faultWash}; padding: 1mm 1.5mm }
.columns { columns: 2; column-gap: 8mm }
footer { margin-top: 4mm; padding-top: 1mm; border-top: 0.3mm solid ${rule} }
@media print { body { padding: 0; max-width: none } .ask li { print-color-adjust: exact; -webkit-print-color-adjust: exact } }
`.trim()

/** `svg`: the drawing; it goes into the page as it is. `pointed`: numbers that the drawing shows. */
export function drawingHtml(page: DrawingPage, svg: string, pointed: ReadonlySet<number>): string {
  const text = (words: string): string => escaped(printable(words))
  const row = ({ number, text: words, place, typed, boxes }: PageEntry): string => {
    const mark = number === null ? '<span></span>' : `<span class="n${pointed.has(number) ? '' : ' bare'}">${number}</span>`
    const notes = [place === '' ? '' : `<span class="place">${text(place)}</span>`, typed === '' ? '' : `<span class="typed">${text(typed)}</span>`].filter((each) => each !== '')
    return `<li>${mark}<span>${text(words)}${notes.length === 0 ? '' : `<br>${notes.join(' &nbsp; ')}`}</span>${boxes.length === 0 ? '<span></span>' : `<span class="boxes">${boxes.map((each) => `<i></i>${text(each)}`).join('<br>')}</span>`}</li>`
  }
  const sections = page.sections.map(({ heading, lead, entries }, k) => [
    `<section${heading === 'Please answer' ? ' class="ask"' : ''} aria-labelledby="h${k}">`,
    `<h2 id="h${k}">${text(heading)}</h2>`,
    ...(lead === '' ? [] : [`<p class="lead">${text(lead)}</p>`]),
    `<ol${heading === 'Left out' && entries.length > 4 ? ' class="columns"' : ''}>`,
    ...entries.map(row),
    '</ol>', '</section>',
  ].join('\n'))
  return [
    '<!doctype html>', '<html lang="en">', '<head>', '<meta charset="utf-8">', '<meta name="viewport" content="width=device-width, initial-scale=1">',
    `<title>${text(page.title)}</title>`, `<style>\n${style}\n</style>`, '</head>', '<body>',
    `<h1>${text(page.title)}</h1>`, `<p>${text(page.read)}</p>`, svg.trim(), ...sections,
    `<footer>${text(page.foot)}</footer>`, '</body>', '</html>', '',
  ].join('\n')
}
