/** Every option of the command line: what it takes, which commands know it, and what `--help` says of it. */

export type Command = 'read' | 'check' | 'raise' | 'adjust' | 'balance'

export const commands: readonly Command[] = ['read', 'check', 'raise', 'adjust', 'balance']

export interface OptionEntry {
  readonly name: string
  /** What its value is called in the help; null for a switch. */
  readonly value: string | null
  readonly repeatable?: true
  /** The heading it stands under. */
  readonly group: 'Reading the plan' | 'What must hold' | 'What it should look like' | 'What the plan keeps' | 'Judging and writing' | 'This run'
  readonly help: string
}

/** In the order in which the help shows them. */
export const optionTable: readonly OptionEntry[] = [
  { name: 'unit', value: 'UNIT', group: 'Reading the plan', help: "the drawing's unit, whatever its file says: mm, cm, m, in, ft" },
  { name: 'scale', value: '1:N', group: 'Reading the plan', help: 'how a drawing on paper was drawn; without it 1:1' },
  { name: 'scale-from', value: 'X1,Y1,X2,Y2,LENGTH', group: 'Reading the plan', help: 'two points of an unscaled drawing and how far apart they truly are' },
  { name: 'layer', value: 'NAME', repeatable: true, group: 'Reading the plan', help: 'take this layer only (repeatable; capitals do not matter)' },
  { name: 'colour', value: 'NAME', repeatable: true, group: 'Reading the plan', help: 'read lines of this colour only: red, 1 to 255, #ff8000 (repeatable)' },
  { name: 'line-type', value: 'NAME', repeatable: true, group: 'Reading the plan', help: 'read lines of this line type only (repeatable)' },
  { name: 'window', value: 'X1,Y1,X2,Y2', group: 'Reading the plan', help: 'read only what lies wholly within this window' },
  { name: 'between', value: 'LOW,HIGH', group: 'Reading the plan', help: 'read only what lies wholly between these two heights: one storey of several' },
  { name: 'inside', value: 'LAYER|X,Y', group: 'Reading the plan', help: 'read only what lies inside the closed line on this layer, or round this point' },
  { name: 'snap', value: 'LENGTH', group: 'Reading the plan', help: 'line ends nearer than this are one node (bare: mm)' },
  { name: 'sagitta', value: 'LENGTH', group: 'Reading the plan', help: 'largest distance of a curve from its chords (bare: mm; default 5)' },
  { name: 'void', value: 'X,Y', repeatable: true, group: 'Reading the plan', help: 'the bounded face round this point is a void, no panel (repeatable)' },
  { name: 'accept', value: 'CODE', repeatable: true, group: 'Reading the plan', help: 'take a proposal of the reader, or "all" (repeatable)' },
  { name: 'leave', value: 'CODE', repeatable: true, group: 'Reading the plan', help: 'leave a proposal, which answers its question with no (repeatable)' },
  { name: 'brief', value: 'FILE', group: 'What must hold', help: 'conditions and wishes as JSON (panewise help brief)' },
  { name: 'rim', value: 'free|level|level=H', group: 'What must hold', help: 'the outer rim floats, is level at the datum, or at H' },
  { name: 'datum', value: 'LEVEL', group: 'What must hold', help: 'the level from which rise and levels count' },
  { name: 'levels', value: 'FILE[#LAYER]', group: 'What must hold', help: 'hold nodes at levels: CSV (name,x,y,level in any order) or points, blocks and words of a DXF' },
  { name: 'one-way', value: 'all|NAMES', group: 'What must hold', help: 'also say whether these joints (J4,J11) can all be ridges; raise writes that roof as one-way.obj' },
  { name: 'levels-within', value: 'LENGTH', group: 'What must hold', help: 'how far a level may lie from its node (default 50mm)' },
  { name: 'pitch', value: 'DEGREES', group: 'What must hold', help: 'all panels in one plane of this pitch' },
  { name: 'bearing', value: 'DEGREES', group: 'What must hold', help: 'with --pitch: the way down, clockwise from +y (default 180)' },
  { name: 'rise', value: 'LENGTH', group: 'What it should look like', help: 'highest node above the springing (default: a tenth of the shorter side)' },
  { name: 'down', value: null, group: 'What it should look like', help: 'the roof hangs from its rim' },
  { name: 'shape', value: 'SHAPE', group: 'What it should look like', help: 'dome (default), barrel, pitched or hipped' },
  { name: 'target', value: 'FILE|input|none', group: 'What it should look like', help: 'come near to the heights of a file, of the plan itself, or of neither' },
  { name: 'few-folds', value: null, group: 'What it should look like', help: 'fold along few joints, as gables and hips do (approximate)' },
  { name: 'densities', value: 'uniform|fit|length|FILE', group: 'What it should look like', help: 'what edges bear while balancing: fit (default) comes near to the plan, length gives all the same force, FILE is a list joint,density (J3, J3-J9, N4-N5, voids or all)' },
  { name: 'stay', value: 'NODE', repeatable: true, group: 'What the plan keeps', help: 'this node stays where it is, like N4 (repeatable)' },
  { name: 'rim-nodes', value: 'slide|fixed|free', group: 'What the plan keeps', help: 'rim nodes slide along straight rim lines (default), stay, or move freely' },
  { name: 'bend', value: null, group: 'What the plan keeps', help: 'straight joint runs may bend' },
  { name: 'keep', value: 'bays|symmetry|axes', repeatable: true, group: 'What the plan keeps', help: 'equal bays stay equal; a symmetric plan stays so; nodes slide along building axes (repeatable)' },
  { name: 'keep-shape', value: 'PANEL', repeatable: true, group: 'What the plan keeps', help: 'this panel keeps its shape in the plan, like P4 (repeatable)' },
  { name: 'largest-shift', value: 'LENGTH', group: 'What the plan keeps', help: 'no node moves by more' },
  { name: 'least-edge', value: 'LENGTH', group: 'What the plan keeps', help: 'no edge gets shorter (default: a quarter of what it is)' },
  { name: 'least-corner', value: 'DEGREES', group: 'What the plan keeps', help: 'no corner gets sharper (default: half of what it is)' },
  { name: 'plan-tolerance', value: 'LENGTH', group: 'What the plan keeps', help: 'what the drawing is exact to (bare: mm; default 1)' },
  { name: 'cure', value: 'CODE[:NAME]', repeatable: true, group: 'Judging and writing', help: 'apply a cure that check lists, like add-diagonals or "release:south gutter" (repeatable, in order)' },
  { name: 'flat', value: 'LENGTH', group: 'Judging and writing', help: 'out of flat that a panel may be (bare: mm; default 1)' },
  { name: 'full', value: null, group: 'Judging and writing', help: 'name frozen joints and flat groups in the summary' },
  { name: 'out', value: 'DIR', group: 'Judging and writing', help: 'where raise writes, and read its report to be sent: one plan into DIR, several into DIR/NAME' },
  { name: 'overwrite', value: null, group: 'Judging and writing', help: 'replace files of an earlier run; foreign files always stay' },
  { name: 'near', value: null, group: 'Judging and writing', help: 'write the nearest roof even when its panels are not flat' },
  { name: 'decimals', value: 'N', group: 'Judging and writing', help: 'round x, y and z to N decimals (default: x, y exact, z to 1 um)' },
  { name: 'csv', value: 'comma|semicolon', group: 'Judging and writing', help: 'lists with commas, or with semicolons and decimal commas' },
  { name: 'at-once', value: 'N', group: 'This run', help: 'how many of several plans are raised at a time (default: one for each core)' },
  { name: 'json', value: null, group: 'This run', help: 'print one JSON object and nothing else' },
  { name: 'quiet', value: null, group: 'This run', help: 'print nothing but errors; the exit code has the verdict' },
  { name: 'help', value: null, group: 'This run', help: 'show this' },
]

const forReading: readonly string[] = ['unit', 'scale', 'scale-from', 'layer', 'colour', 'line-type', 'window', 'between', 'inside', 'snap', 'sagitta', 'void', 'accept', 'leave', 'levels-within', 'plan-tolerance', 'brief', 'out', 'overwrite', 'json', 'quiet', 'help']

/** Options that say nothing to balancing: the densities shape the roof. */
const notBalancing: readonly string[] = ['near', 'cure', 'one-way', 'few-folds', 'shape', 'target', 'at-once']

/** The options that a command knows; check takes those of raise, so that a command line can be tried before it writes. */
export function optionsOf(command: Command): readonly OptionEntry[] {
  if (command === 'read') return optionTable.filter(({ name }) => forReading.includes(name))
  if (command === 'balance') return optionTable.filter(({ name, group }) => group !== 'What the plan keeps' && !notBalancing.includes(name))
  return command === 'adjust' ? optionTable.filter(({ name }) => !['near', 'cure', 'one-way', 'few-folds', 'densities', 'at-once'].includes(name)) : optionTable.filter(({ name, group }) => name !== 'densities' && (name === 'plan-tolerance' || group !== 'What the plan keeps'))
}
