import { randomUUID } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { mkdir, rename, rm } from 'node:fs/promises';
import { basename, dirname, join } from 'node:path';
import { parseDocument, stringify } from 'yaml';
import { type TrialRecord, trialRecordSchema } from '../../shared-model/trials/trial.ts';
import { syncFolder, writeNewFile } from '../record/durable-file.ts';

/** The companion of a rig file keeps the trials of its machine, oldest first; nothing in it is ever changed. */
export type CompanionResult =
  | { readonly ok: true; readonly records: readonly TrialRecord[] }
  | { readonly ok: false; readonly errors: readonly string[] };

/** `rig.yaml` has `rig.bench.yaml` beside it, or in another folder where the rig file's own is not for writing. */
export const companionPath = (rigFile: string, folder = dirname(rigFile)): string =>
  join(folder, `${basename(rigFile).replace(/\.ya?ml$/i, '')}.bench.yaml`);

const HEAD = `# Trials of this machine, written by Foldback; see the Bench tab. SI units. New trials are added at the end, and the
# newest of a kind is in force until it expires. Nothing here is ever changed: to undo a trial, make it again.
`;

/** Reads a companion. That there is none yet is no fault. */
export const readCompanion = (path: string): CompanionResult => {
  let text: string;
  try {
    text = readFileSync(path, 'utf8');
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException;
    if (code === 'ENOENT') return { ok: true, records: [] };
    return {
      ok: false,
      errors: [`${path}: cannot be read (${code ?? String(error)}). Give it back, or move it away.`],
    };
  }
  return parseCompanion(text, path);
};

const parseCompanion = (text: string, path: string): CompanionResult => {
  const document = parseDocument(text);
  const [broken] = document.errors;
  if (broken !== undefined)
    return { ok: false, errors: [`${path}: not valid YAML: ${broken.message.split('\n')[0]}`] };
  const list: unknown = document.toJS() ?? [];
  if (!Array.isArray(list))
    return { ok: false, errors: [`${path}: must be a list of trials (found ${typeof list}).`] };
  const parsed = list.map((entry) => trialRecordSchema.safeParse(entry));
  const errors = parsed.flatMap(({ error }, i) =>
    (error?.issues ?? []).map(
      (issue) => `${path}: trial ${i + 1}: ${issue.path.join('.') || 'entry'}: ${issue.message}`,
    ),
  );
  if (errors.length > 0) return { ok: false, errors };
  return { ok: true, records: parsed.map((one) => one.data as TrialRecord) };
};

/**
 * Adds one trial at the end, on disk when this resolves; all that was there stays to the letter. Rejects, leaving the file
 * as it was, where it cannot be understood or written.
 */
export const appendTrial = async (path: string, record: TrialRecord): Promise<void> => {
  const present = readCompanion(path);
  if (!present.ok) throw new Error(present.errors.join(' '));
  const before = present.records.length === 0 ? HEAD : readFileSync(path, 'utf8').replace(/\n*$/, '\n');
  const fresh = `${path}.${randomUUID().slice(0, 8)}`;
  await mkdir(dirname(path), { recursive: true });
  await writeNewFile(fresh, `${before}${stringify([record])}`);
  try {
    const after = parseCompanion(readFileSync(fresh, 'utf8'), path);
    if (!after.ok || after.records.length !== present.records.length + 1)
      throw new Error(`${path} could not be added to without changing it; the trial was not saved.`);
    await rename(fresh, path);
  } catch (error) {
    await rm(fresh, { force: true });
    throw error;
  }
  await syncFolder(dirname(path));
};
