/** What `--help` prints, made from the table of options. */
import { optionsOf, type Command, type OptionEntry } from './option-table.ts'

const purpose: Readonly<Record<Command, string>> = {
  read: 'Reads a plan and says what it holds, what was repaired and what is open.',
  check: 'Says whether a plan can be raised into a roof of flat panels under the given conditions. Writes nothing.',
  adjust: 'Moves nodes, as little as can be, until the plan lifts as asked; writes plan.obj, the roof and its lists, shifts.csv and shifts.svg.',
  balance: 'Keeps the outer rim and lets the other nodes go where their edges balance, so that the plan lifts; writes what adjust writes.',
  raise: 'Raises a plan and writes the roof (roof.obj), the lists (panels.csv, joints.csv, nodes.csv) and summary.json.',
}

export const usage = `panewise turns the plan of a glazed roof into a roof of flat panels, or says what stands in the way.

  panewise read  PLAN...            what a plan holds
  panewise check PLAN...            whether it can be raised
  panewise raise PLAN... --out DIR  the roof and its lists
  panewise adjust PLAN --out DIR    the nearest plan that lifts, and its roof
  panewise balance PLAN --out DIR   a plan that lifts by construction, from densities
  panewise COMMAND --help           the options of a command
  panewise help brief               the schema of a brief (JSON Schema)
  panewise help formats             what is read of which format
  panewise help codes               exit codes, repairs, problems
  panewise --version

PLAN is a drawing (DXF, SVG, OBJ, GeoJSON); "-" reads standard input.
`

export function commandHelp(command: Command): string {
  const entries = optionsOf(command)
  const groups = [...new Set(entries.map(({ group }) => group))]
  const width = Math.max(...entries.map((entry) => synopsis(entry).length))
  const blocks = groups.map((group) => {
    const lines = entries.filter((entry) => entry.group === group).map((entry) => `  ${synopsis(entry).padEnd(width)}  ${entry.help}`)
    return `${group}\n${lines.join('\n')}\n`
  })
  const out = command === 'raise' || command === 'adjust' || command === 'balance' ? ' --out DIR' : ''
  const tried = command === 'check' ? 'The options of raise are known here too, so that a command line can be tried before it writes.\n' : ''
  return (
    `panewise ${command} PLAN...${out} [options]\n\n${purpose[command]}\n${tried}\n${blocks.join('\n')}\n` +
    "A bare length is in the plan's unit unless said otherwise; every length takes mm, cm, m, in or ft. Values may begin with a minus.\n" +
    'Exit codes: 0 lifts, 3 lifts in part or within tolerance, 1 does not lift, 2 bad input or use or an open question.\n'
  )
}

const synopsis = ({ name, value }: OptionEntry): string => `--${name}${value === null ? '' : ` ${value}`}`
