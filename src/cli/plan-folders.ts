/** Folders for the plans of one run: a name each, made of the plan's own. */
import { basename } from 'node:path'
import { stdinName } from './read-input.ts'

/** The list over all plans that stands beside their folders. */
export const overviewName = 'summary.csv'

/**
 * The file's name without its ending and without dots in front; a second plan of the same name (capitals do not tell
 * names apart on every disk) is NAME-2.
 */
export function planFolders(plans: readonly string[]): string[] {
  const taken = new Set([overviewName])
  return plans.map((plan) => {
    const stem = plan === '-' ? stdinName : basename(plan).replace(/^\.+/, '').replace(/\.[^.]*$/, '') || 'plan'
    let name = stem
    for (let number = 2; taken.has(name.toLowerCase()); number += 1) name = `${stem}-${number}`
    taken.add(name.toLowerCase())
    return name
  })
}
