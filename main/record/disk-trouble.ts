/** What a person can do about a disk that does not take the mission. */
export const explainDisk = (error: unknown, folder: string): string => {
  switch ((error as NodeJS.ErrnoException).code) {
    case 'ENOSPC':
    case 'EDQUOT':
      return `The disk of ${folder} is full. Free some space; recording goes on by itself.`;
    case 'EACCES':
    case 'EPERM':
    case 'EROFS':
      return `${folder} may not be written. Allow writing there, or start with another folder (--missions).`;
    case 'ENOENT':
      return `${folder} is gone. Put the disk back; recording goes on by itself in a new folder.`;
    case 'ENOTDIR':
    case 'EEXIST':
      return `${folder} cannot be made: a file is in the way. Move it, or start with another folder (--missions).`;
    case 'EIO':
    case 'ENODEV':
    case 'ENXIO':
      return `The disk of ${folder} fails. Start with a folder on another disk (--missions).`;
    default:
      return `${folder} cannot be written (${error instanceof Error ? error.message : String(error)}). Check the disk.`;
  }
};

/** The log is no longer where its name says; bytes written to it would be lost. */
export class LogLost extends Error {}

export const isLost = (error: unknown): boolean =>
  error instanceof LogLost || (error as NodeJS.ErrnoException).code === 'ENOENT';
