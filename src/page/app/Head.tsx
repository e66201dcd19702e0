/** The head: what is open, and the commands as underlined words with their keys. */
import { commands, headCommands } from '../store/commands.ts'
import { useDesk, useDeskState } from './context.ts'

export function Head() {
  const desk = useDesk()
  const name = useDeskState((state) => state.opening?.file.name ?? state.doc?.name ?? '')
  const opening = useDeskState((state) => state.opening !== null)
  const theme = useDeskState((state) => state.theme)
  const elsewhere = useDeskState((state) => state.elsewhere)
  return (
    <header className="head">
      <h1>Panewise</h1>
      <span className="open-name">{name === '' ? 'no drawing open' : opening ? <>Opening a drawing <span className="note">{name}</span></> : name}</span>
      {elsewhere !== '' && <span className="elsewhere" role="status">{elsewhere}</span>}
      <nav aria-label="Commands">
        {headCommands.map((key) => {
          const command = commands.find((entry) => entry.key === key)
          if (command === undefined) return null
          const title = key === 'L' && theme === 'night' ? 'Day' : command.title
          return <button key={key} className="word" onClick={() => command.run(desk)}>{title} <kbd>{key}</kbd></button>
        })}
      </nav>
      <input
        id="open-file" type="file" hidden accept=".dxf,.obj,.svg,.geojson,.json,.csv,.txt"
        onChange={(event) => {
          const file = event.currentTarget.files?.[0]
          event.currentTarget.value = ''
          if (file !== undefined) void file.arrayBuffer().then((bytes) => desk.openFile(file.name, new Uint8Array(bytes)))
        }}
      />
    </header>
  )
}
