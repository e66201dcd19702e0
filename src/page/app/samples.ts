/** The samples that the page offers: files of the samples folder, taken into the build as text. */
const files = import.meta.glob('../../../samples/*.{dxf,obj,svg,geojson,panewise.json}', { query: '?raw', import: 'default' })
const notes = import.meta.glob('../../../samples/*.txt', { query: '?raw', import: 'default', eager: true })

export interface Sample {
  readonly name: string
  /** A line on why it is there. */
  readonly note: string
  readonly text: () => Promise<string>
}

export const samples: readonly Sample[] = Object.entries(files).map(([path, load]) => {
  const name = path.split('/').pop() ?? path
  const note = notes[path.replace(/\.(?:panewise\.json|[a-z]+)$/, '.txt')]
  return { name, note: typeof note === 'string' ? note.trim() : '', text: async () => String(await load()) }
})
