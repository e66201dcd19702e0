/** Why the operating system refused, as a clause for people. */
const reasons: Readonly<Record<string, string>> = {
  ENOENT: 'it does not exist',
  EACCES: 'access is denied',
  EPERM: 'the system does not permit it',
  EROFS: 'the file system is read-only',
  ENOSPC: 'the disk is full',
  EDQUOT: 'the disk quota is used up',
  EFBIG: 'the file would be larger than the system allows',
  EISDIR: 'it is a folder',
  ENOTDIR: 'a part of its path is no folder',
  ENAMETOOLONG: 'its name is too long',
  ELOOP: 'its links lead in a circle',
  EIO: 'the disk reports a fault',
  EMFILE: 'too many files are open',
  ENFILE: 'too many files are open',
  EBUSY: 'another program uses it',
  ENOTEMPTY: 'another run has filled it in the meantime',
  EEXIST: 'another run has made it in the meantime',
  EXDEV: 'it lies on another disk',
  ERR_FS_FILE_TOO_LARGE: 'it is larger than 2 GiB',
}

/** The system's code of an error, "" for one that is not the system's. */
export function osCode(error: unknown): string {
  return error instanceof Error && 'code' in error && typeof error.code === 'string' ? error.code : ''
}

export function osReason(error: unknown): string {
  const code = osCode(error)
  return reasons[code] ?? (code === '' ? String(error) : `the system says ${code}`)
}
