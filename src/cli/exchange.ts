/**
 * Exchanges the files of a folder for new ones that lie aside, all or none. A journal says what is under way, so that
 * whoever finds a half-done exchange later can take it back.
 *
 * Aside: `new/` holds the new files, `old/` the old ones once they have left, `journal` is there while files move.
 */
import { basename, dirname, join } from 'node:path'
import { makeFolders, type FileSystem } from './file-system.ts'

/** The file that says what a folder holds: it leaves first and comes last, so that a folder that has one is complete. */
const lastFile = 'summary.json'

interface Journal {
  /** Paths of the new files, relative to the folder. */
  readonly arriving: readonly string[]
  /** Paths of the files that they replace or that go away. */
  readonly leaving: readonly string[]
  /** Subfolders that had to be made. */
  readonly made: readonly string[]
}

/** Moves the files `leaving` out of `target` and `arriving` in from `aside`; takes all back and throws when a move fails. */
export function exchange(fs: FileSystem, target: string, aside: string, arriving: readonly string[], leaving: readonly string[]): void {
  const made = [...new Set(arriving.map((path) => dirname(path)))].filter((folder) => !fs.existsSync(join(target, folder)))
  const journal: Journal = { arriving: summaryFirst(arriving).reverse(), leaving: summaryFirst(leaving), made }
  fs.writeFileSync(join(aside, 'journal.part'), JSON.stringify(journal))
  fs.renameSync(join(aside, 'journal.part'), join(aside, 'journal'))
  try {
    for (const path of journal.leaving) move(fs, join(target, path), join(aside, 'old', path))
    for (const path of journal.arriving) move(fs, join(aside, 'new', path), join(target, path))
  } catch (error) {
    takeBack(fs, target, aside, journal)
    throw error
  }
}

/** Takes back an exchange that was broken off; one that was not begun, or had all files moved, is left as it is. */
export function settle(fs: FileSystem, target: string, aside: string): void {
  if (!fs.existsSync(join(aside, 'journal'))) return
  const journal = JSON.parse(fs.readFileSync(join(aside, 'journal'), 'utf8')) as Journal
  if (journal.arriving.some((path) => fs.existsSync(join(aside, 'new', path)))) takeBack(fs, target, aside, journal)
}

/** May itself be broken off and done again: every move is decided by what lies where. */
function takeBack(fs: FileSystem, target: string, aside: string, { arriving, leaving, made }: Journal): void {
  for (const path of [...arriving].reverse()) {
    const arrived = !fs.existsSync(join(aside, 'new', path)) && fs.existsSync(join(target, path))
    if (arrived) move(fs, join(target, path), join(aside, 'new', path))
  }
  for (const path of [...leaving].reverse()) {
    if (fs.existsSync(join(aside, 'old', path))) move(fs, join(aside, 'old', path), join(target, path))
  }
  for (const folder of made) if (fs.existsSync(join(target, folder))) fs.rmdirSync(join(target, folder))
}

function move(fs: FileSystem, from: string, to: string): void {
  makeFolders(fs, dirname(to))
  fs.renameSync(from, to)
}

const summaryFirst = (paths: readonly string[]): string[] =>
  [...paths].sort((a, b) => Number(basename(b) === lastFile) - Number(basename(a) === lastFile))
