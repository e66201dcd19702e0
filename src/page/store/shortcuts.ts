/** Keys to commands. Letters are silent while something is typed, and can be switched off altogether. */
import { commands } from './commands.ts'
import type { Desk } from './desk.ts'

export function listenForKeys(desk: Desk): () => void {
  const listen = (event: KeyboardEvent): void => {
    if (event.defaultPrevented || event.altKey) return
    const target = event.target instanceof HTMLElement ? event.target : null
    const typing = target !== null && (target.matches('input:not([type=checkbox]):not([type=radio]), textarea, select') || target.isContentEditable)
    if (event.ctrlKey || event.metaKey) {
      if (typing) return
      const key = event.key.toLowerCase()
      if (key === 'z' && !event.shiftKey) desk.undo()
      else if (key === 'y' || (key === 'z' && event.shiftKey)) desk.redo()
      else return
      event.preventDefault()
      return
    }
    if (event.key === 'Escape') {
      if (desk.state.dialog !== null) return
      if (desk.state.inHand !== null) desk.putDown(false)
      else if (desk.state.opening !== null) desk.putAway()
      else desk.set({ selection: null, picked: [], gathered: null, problem: null })
      return
    }
    if (typing || desk.state.dialog !== null || !desk.state.letterKeys) return
    const command = commands.find(({ key }) => key === event.key.toUpperCase())
    if (command === undefined) return
    event.preventDefault()
    command.run(desk)
  }
  window.addEventListener('keydown', listen)
  return () => window.removeEventListener('keydown', listen)
}
