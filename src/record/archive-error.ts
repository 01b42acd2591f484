/** The archive can't be used as it stands: the message says what is wrong, where, and what to do. */
export class ArchiveError extends Error {
  override readonly name = 'ArchiveError';
}

/** What the operating system says about a folder or file, in words that lead to a remedy. */
export function archiveError(error: unknown, path: string): ArchiveError {
  if (error instanceof ArchiveError) return error;
  const code = errorCode(error);
  const remedy = code === undefined ? undefined : remedies[code];
  const said = error instanceof Error ? error.message : String(error);
  return new ArchiveError(remedy === undefined ? `${path}: ${said}` : `${path}: ${remedy} (${code})`, { cause: error });
}

const denied = 'this may not be written: give yourself the right to write there, or choose another folder with --out';

const remedies: Readonly<Record<string, string>> = {
  EACCES: denied,
  EPERM: denied,
  EROFS: denied,
  ENOSPC: 'the disk is full: make room and run the command again',
  EDQUOT: 'your share of the disk is used up: make room and run the command again',
  ENOTDIR: 'a file stands where a folder is needed: move it away, or choose another folder with --out',
  EEXIST: 'a file stands where a folder is needed: move it away, or choose another folder with --out',
  EMFILE: 'too many files are open on this machine: close some programs and run the command again',
};

/** The operating system's short name for what went wrong (`ENOENT`), where the error has one. */
export const errorCode = (error: unknown): string | undefined =>
  error instanceof Error && 'code' in error && typeof error.code === 'string' ? error.code : undefined;
