/** The calls of the file system that writing uses; tests put one in that fails or dies at a chosen call. */
import nodeFs from 'node:fs'
import { dirname } from 'node:path'

export type FileSystem = Pick<
  typeof nodeFs,
  'mkdirSync' | 'writeFileSync' | 'readFileSync' | 'renameSync' | 'rmSync' | 'rmdirSync' | 'readdirSync' | 'statSync' | 'existsSync'
>

export const diskFiles: FileSystem = nodeFs

/**
 * Makes a folder and those above it; returns the first one that had to be made, null when all were there. One by one,
 * because the recursive call reports a read-only disk as a missing folder.
 */
export function makeFolders(fs: FileSystem, folder: string): string | null {
  if (fs.existsSync(folder)) return null
  const above = dirname(folder) === folder ? null : makeFolders(fs, dirname(folder))
  try {
    fs.mkdirSync(folder)
  } catch (error) {
    if (above !== null) removeEmpty(fs, dirname(folder), above)
    throw error
  }
  return above ?? folder
}

/** Removes the folder `from` and those above it up to `upTo`, as long as they are empty. */
export function removeEmpty(fs: FileSystem, from: string, upTo: string): void {
  try {
    for (let folder = from; folder.startsWith(upTo); folder = dirname(folder)) fs.rmdirSync(folder)
  } catch {
    // Somebody has put something there: then it stays.
  }
}
