/** The page about a drawing as Markdown; the drawing lies beside it. */
import type { DrawingPage, PageEntry } from './drawing-page.ts'
import { printable } from './printable.ts'

/** `picture`: name of the SVG file beside the text. */
export function drawingMarkdown(page: DrawingPage, picture: string): string {
  const row = ({ number, text, place, typed, boxes }: PageEntry): string => {
    const head = number === null ? '- ' : `- **${number}** `
    const notes = [place === '' ? '' : plain(place), typed === '' ? '' : `(\`${printable(typed).replace(/`/g, "'")}\`)`].filter((each) => each !== '').join(' ')
    return `${head}${plain(text)}${notes === '' ? '' : ` ${notes}`}${boxes.length === 0 ? '' : ` ${boxes.map((each) => `\u2610\u00a0${plain(each)}`).join('  ')}`}`
  }
  const sections = page.sections.map(({ heading, lead, entries }) => [`## ${plain(heading)}`, ...(lead === '' ? [] : [plain(lead)]), entries.map(row).join('\n')].join('\n\n'))
  return `${[`# ${plain(page.title)}`, plain(page.read), `![The plan, with the numbers of the list](${picture})`, ...sections, '---', plain(page.foot)].join('\n\n')}\n`
}

/** Text in which no sign is markup: names in a drawing may hold any (CommonMark 0.31, 2.4: any ASCII punctuation may be escaped). */
function plain(text: string): string {
  return printable(text).replace(/[\\`*_[\]<>|~#&!]/g, '\\$&').replace(/^([-+]|\d+[.)])/, '\\$1')
}
