/**
 * Writes the files of one run so that they appear together at the end or not at all.
 *
 * Everything is first written aside, on the same disk: into `.NAME.panewise-PID` beside a folder that does not exist yet,
 * which then takes its name by one rename; or into `.panewise-PID` inside a folder that does exist, from which the files
 * are moved one by one (`exchange.ts`). If a move fails, all are taken back. If the process is killed, the next run into
 * the folder finds what is left, takes a half-done exchange back, and removes it.
 *
 * Tried and dropped: linking foreign files into a new folder and swapping the two. It would close the last gap (a kill
 * between two moves, some 100 microseconds), but it changes the folder under whoever has it open, and cannot be done for
 * links and mount points.
 */
import { dirname, join, resolve, basename } from 'node:path'
import { fail, ok, type Result } from '../base/result.ts'
import { exchange, settle } from './exchange.ts'
import { diskFiles, makeFolders, removeEmpty, type FileSystem } from './file-system.ts'
import { osCode, osReason } from './os-reason.ts'

export interface OutputOptions {
  /** Whether files of ours that are there already are replaced. */
  readonly overwrite: boolean
  /** All paths that a run like this may write; with `overwrite` those that this one does not write are removed. */
  readonly owned: readonly string[]
  readonly fs?: FileSystem
  readonly pid?: number
  /** Whether another process with this number is alive; tests answer for the dead. */
  readonly isAlive?: (pid: number) => boolean
}

export interface Output {
  /** Writes a file aside; `path` is relative to the folder, at most one folder deep. After a failure all is discarded. */
  put(path: string, bytes: Uint8Array): Result<null>
  /** Puts everything in its place. After a failure all is discarded. */
  commit(): Result<null>
  /** Removes what was written aside. Harmless after `commit`. */
  discard(): void
}

const marker = '.panewise-'

/**
 * Opens `folder` for one run. Fails at once, before any work is done, with code "out-is-no-folder", "files-exist" or
 * "cannot-write".
 */
export function openOutput(folder: string, options: OutputOptions): Result<Output> {
  const { overwrite, owned, fs = diskFiles, pid = process.pid, isAlive = otherIsAlive } = options
  const target = resolve(folder)
  try {
    removeLeftovers(fs, target, isAlive)
    const exists = fs.existsSync(target)
    if (exists && !fs.statSync(target).isDirectory()) {
      return fail('out-is-no-folder', 'this is a file and cannot take the output', { file: folder }, 'name a folder with --out')
    }
    const there = exists ? inTheWay(fs, folder, target, owned, overwrite) : null
    if (there !== null) return there
    const aside = exists ? join(target, `${marker}${pid}`) : join(dirname(target), `.${basename(target)}${marker}${pid}`)
    const made = makeFolders(fs, dirname(target))
    const open = output({ fs, folder, target, aside, exists, made, overwrite, owned })
    try {
      makeFolders(fs, exists ? join(aside, 'new') : aside)
    } catch (error) {
      open.discard()
      throw error
    }
    return ok(open)
  } catch (error) {
    return cannotWrite(folder, error)
  }
}

interface Open {
  readonly fs: FileSystem
  /** As the user wrote it, and in full. */
  readonly folder: string
  readonly target: string
  readonly aside: string
  readonly exists: boolean
  /** The first folder above the target that had to be made. */
  readonly made: string | null
  readonly overwrite: boolean
  readonly owned: readonly string[]
}

function output({ fs, folder, target, aside, exists, made, overwrite, owned }: Open): Output {
  const paths: string[] = []
  let isOver = false

  const discard = (): void => {
    if (isOver) return
    isOver = true
    try {
      fs.rmSync(aside, { recursive: true, force: true })
    } catch {
      // What cannot be removed now is removed by the next run.
    }
    if (made !== null) removeEmpty(fs, dirname(target), made)
  }
  const failed = <T>(problem: T): T => {
    discard()
    return problem
  }

  return {
    put(path, bytes) {
      try {
        const place = join(aside, exists ? 'new' : '', path)
        makeFolders(fs, dirname(place))
        fs.writeFileSync(place, bytes)
        paths.push(path)
        return ok(null)
      } catch (error) {
        return failed(cannotWrite(folder, error))
      }
    },

    commit() {
      try {
        if (!exists) {
          // Fails when another run has made and filled the folder in the meantime.
          fs.renameSync(aside, target)
          isOver = true
          return ok(null)
        }
        const there = inTheWay(fs, folder, target, paths, overwrite)
        if (there !== null) return failed(there)
        const leaving = [...new Set([...owned, ...paths])].filter((path) => fs.existsSync(join(target, path)))
        exchange(fs, target, aside, paths, leaving)
        discard()
        return ok(null)
      } catch (error) {
        return failed(cannotWrite(folder, error))
      }
    },

    discard,
  }
}

/** What killed runs have left in the folder and beside it. */
function removeLeftovers(fs: FileSystem, target: string, isAlive: (pid: number) => boolean): void {
  for (const [folder, prefix] of [[target, marker], [dirname(target), `.${basename(target)}${marker}`]] as const) {
    if (!fs.existsSync(folder) || !fs.statSync(folder).isDirectory()) continue
    for (const name of fs.readdirSync(folder)) {
      const pid = name.startsWith(prefix) ? name.slice(prefix.length) : ''
      if (!/^\d+$/.test(pid) || isAlive(Number(pid))) continue
      settle(fs, target, join(folder, name))
      fs.rmSync(join(folder, name), { recursive: true, force: true })
    }
  }
}

/** A number equal to our own is a leftover too: in a container each run may have the same one. */
function otherIsAlive(pid: number): boolean {
  if (pid === process.pid) return false
  try {
    process.kill(pid, 0)
    return true
  } catch (error) {
    return osCode(error) === 'EPERM'
  }
}

/** What keeps the files from their places: a file when it may not be replaced, a folder of somebody else's in any case. */
function inTheWay(fs: FileSystem, folder: string, target: string, paths: readonly string[], overwrite: boolean): Result<never> | null {
  for (const path of paths) {
    const place = join(target, path)
    if (!fs.existsSync(place)) continue
    if (fs.statSync(place).isDirectory()) {
      return fail('files-exist', `${path} is a folder there and is left alone`, { file: folder }, 'name another folder with --out')
    }
    if (overwrite) continue
    return fail('files-exist', `${path} is there already`, { file: folder }, 'name another folder with --out, or add --overwrite to replace it')
  }
  return null
}

const cannotWrite = (folder: string, error: unknown): Result<never> =>
  fail('cannot-write', `nothing was written, since ${osReason(error)}`, { file: folder }, 'name another folder with --out')
