/**
 * What the system's errors on files and directories mean, in words that say what to do. The path stands before the
 * sentence where it is shown, so it is not repeated.
 */

/** Whether an exception is one of the system's errors (it has a code such as ENOENT). */
export function isSystemError(error: unknown): error is NodeJS.ErrnoException {
  return error instanceof Error && typeof (error as NodeJS.ErrnoException).syscall === 'string';
}

/** Why a file could not be read. */
export function whyUnreadable(error: unknown): string {
  switch (isSystemError(error) ? error.code : undefined) {
    case 'ENOENT':
      return 'there is no such file';
    case 'ENOTDIR':
      return 'there is no such file (a part of its path is a file, not a directory)';
    case 'EISDIR':
      return 'this is a directory; name the file in it';
    case 'EACCES':
    case 'EPERM':
      return 'the file may not be read (permission denied)';
    default:
      return `the file could not be read (${messageOf(error)})`;
  }
}

/** Why a directory could not be made or a file not be written in it. */
export function whyUnwritable(error: unknown): string {
  switch (isSystemError(error) ? error.code : undefined) {
    case 'EEXIST':
    case 'ENOTDIR':
      return 'this, or a part of its path, is a file; a directory is needed';
    case 'EISDIR':
      return 'a file of the result has the name of a directory that stands there; move it away';
    case 'EACCES':
    case 'EPERM':
      return 'nothing may be written here (permission denied)';
    case 'EROFS':
      return 'nothing may be written here (read-only file system)';
    case 'ENOSPC':
    case 'EDQUOT':
      return 'the disk is full; nothing of this run was kept. Fewer frames or tables (--frames, --tables) need less room';
    default:
      return `files could not be written (${messageOf(error)})`;
  }
}

function messageOf(error: unknown): string {
  return error instanceof Error ? error.message : String(error);
}
