/** The samples that the page offers: files of the samples folder, taken into the build as text, with the lines of its list. */
import list from '../../../samples/README.md?raw'

const plans = import.meta.glob('../../../samples/*.{dxf,obj,svg,geojson,panewise.json}', { query: '?raw', import: 'default' })
const briefs = import.meta.glob('../../../samples/*.brief.json', { query: '?raw', import: 'default' })

export interface Sample {
  readonly name: string
  /** A line on why it is there. */
  readonly note: string
  readonly panels: string
  readonly text: () => Promise<string>
  /** The brief beside it; null: none. */
  readonly brief: (() => Promise<string>) | null
  /** N of 1:N where the drawing is on paper. */
  readonly scale: number | null
}

/** In the order of the list: its rows are | `name` ... | panels | note | verdict |. */
export const samples: readonly Sample[] = [...list.matchAll(/^\| `([^`]+)`[^|]*\| (\d*) \| ([^|]+) \|/gm)].flatMap(([, name, panels, note]) => {
  const load = plans[`../../../samples/${name}`]
  const brief = briefs[`../../../samples/${name.replace(/\.[a-z]+$/, '.brief.json')}`]
  if (load === undefined) return []
  // What the list says to the command line is not said here: the page answers it itself.
  const scale = /--scale 1:(\d+)/.exec(note)
  return [{
    name, panels, note: note.replace(/: read it with `[^`]*`\.?/, '.').replace(/`/g, ''), text: async () => String(await load()),
    brief: brief === undefined || !/^\| `[^`]+` with its brief/m.test(list.slice(list.indexOf(`\`${name}\``) - 2)) ? null : async () => String(await brief()),
    scale: scale === null ? null : Number(scale[1]),
  }]
})
