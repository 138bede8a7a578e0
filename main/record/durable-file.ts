import { open, rm } from 'node:fs/promises';

/** Writes a new file that is on disk when this resolves. Rejects with the system's error, leaving nothing half-written. */
export const writeNewFile = async (path: string, content: string | Uint8Array): Promise<void> => {
  const file = await open(path, 'wx');
  try {
    await file.writeFile(content);
    await file.sync();
  } catch (error) {
    await rm(path, { force: true }).catch(() => {});
    throw error;
  } finally {
    await file.close();
  }
};

/** Makes names in a folder (new files, renames) outlast a power cut, where the system can; Windows does so by itself. */
export const syncFolder = async (path: string): Promise<void> => {
  try {
    const folder = await open(path, 'r');
    await folder.sync().finally(() => folder.close());
  } catch {
    // The file's own bytes are safe all the same.
  }
};
