/** All commands with their keys: the keyboard, the head and the list of keys read the same table. */
import { sides } from '../../paper/drawing/projection.ts'
import type { ReadingName } from '../../paper/drawing/reading.ts'
import type { Desk } from './desk.ts'
import { canRedo, canUndo } from './steps.ts'
import type { Pane } from './state.ts'

export interface Command {
  readonly key: string
  readonly title: string
  readonly group: 'file' | 'steps' | 'look' | 'readings' | 'go' | 'edit'
  readonly run: (desk: Desk) => void
}

const reading = (key: string, name: ReadingName, title: string): Command => ({ key, title, group: 'readings', run: (desk) => desk.set({ reading: name }) })

/** Moves the focus to a pane; on a phone also shows it. */
const go = (key: string, pane: string, title: string, shown?: Pane): Command => ({
  key, title, group: 'go',
  run: (desk) => {
    if (shown !== undefined) desk.set({ pane: shown })
    const focused = (): boolean => {
      const first = document.querySelector<HTMLElement>(`[data-pane="${pane}"] [data-first]`)
      first?.focus()
      return document.activeElement === first
    }
    // At once, for the key that follows; a pane that is only now shown takes it a frame later.
    if (!focused()) requestAnimationFrame(focused)
  },
})

export const commands: readonly Command[] = [
  { key: 'O', title: 'Open', group: 'file', run: () => document.querySelector<HTMLInputElement>('#open-file')?.click() },
  { key: 'T', title: 'Take away', group: 'file', run: (desk) => desk.set({ dialog: 'take' }) },
  { key: 'P', title: 'Print', group: 'file', run: () => window.print() },
  { key: 'L', title: 'Night', group: 'look', run: (desk) => desk.set({ theme: desk.state.theme === 'day' ? 'night' : 'day' }) },
  { key: '?', title: 'Keys', group: 'look', run: (desk) => desk.set({ dialog: 'keys' }) },
  { key: 'W', title: 'Words', group: 'look', run: (desk) => desk.set({ dialog: 'words' }) },
  { key: 'U', title: 'Undo', group: 'steps', run: (desk) => canUndo(desk.state) && desk.undo() },
  { key: 'R', title: 'Redo', group: 'steps', run: (desk) => canRedo(desk.state) && desk.redo() },
  { key: 'C', title: 'Compare with the step before', group: 'steps', run: (desk) => desk.compare(desk.state.compared === null && desk.state.at >= 0 ? Math.max(0, desk.state.at - 1) : null) },
  go('1', 'plan', 'Plan', 'plan'), go('2', 'chart', 'Slope chart', 'chart'), go('3', 'roof', 'Roof', 'roof'),
  go('4', 'list', 'Panel list', 'list'), go('5', 'ways', 'Conditions, profile, ways left'), go('6', 'steps', 'Steps', 'steps'),
  reading('S', 'slope', 'Slope'), reading('F', 'flatness', 'Flatness'), reading('D', 'fold', 'Fold'),
  reading('E', 'force', 'Form force'), reading('A', 'group', 'Flat group'), reading('M', 'freedom', 'Freedom'),
  { key: 'V', title: 'Next view of the roof', group: 'look', run: (desk) => desk.view(sides[(sides.indexOf(desk.state.side) + 1) % sides.length] ?? 'south') },
  { key: 'G', title: 'Gather what is selected with others', group: 'edit', run: (desk) => desk.state.selection !== null && desk.gather(desk.state.selection) },
  { key: 'H', title: 'Hold what is selected', group: 'edit', run: () => document.querySelector<HTMLElement>('[data-hold]')?.click() },
  { key: 'X', title: 'Release what is selected', group: 'edit', run: () => document.querySelector<HTMLElement>('[data-release]')?.click() },
]

/** The words of the head, in order. */
export const headCommands = ['O', 'T', 'P', 'L', 'W', '?']

/** Keys that belong to the drawings and are listed with the others. */
export const drawingKeys: readonly (readonly [string, string])[] = [
  ['arrows', 'next panel by neighbourhood; in the list, up and down'], ['Enter', 'type a value'], ['+ \u2212', 'zoom the drawing'], ['0', 'fit the drawing'],
  ['Esc', 'put down what is in hand'], ['Ctrl Z, Ctrl Y', 'undo, redo'], ['Tab', 'next control'],
]
