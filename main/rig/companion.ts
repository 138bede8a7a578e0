import { randomUUID } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { mkdir, rename, rm } from 'node:fs/promises';
import { basename, dirname, join, resolve } from 'node:path';
import { isNode, LineCounter, parseDocument, stringify } from 'yaml';
import { type TrialRecord, trialRecordSchema } from '../../shared-model/trials/trial.ts';
import { syncFolder, writeNewFile } from '../record/durable-file.ts';

/** The companion of a rig file keeps the trials of its machine, oldest first; nothing in it is ever changed. */
export type CompanionResult =
  | { readonly ok: true; readonly records: readonly TrialRecord[] }
  /** One sentence a fault: file, line, trial, key, what is allowed. */
  | { readonly ok: false; readonly errors: readonly string[] };

/** `rig.yaml` has `rig.bench.yaml` beside it, or in another folder where the rig file's own is not for writing. */
export const companionPath = (rigFile: string, folder = dirname(rigFile)): string =>
  join(folder, `${basename(rigFile).replace(/\.ya?ml$/i, '')}.bench.yaml`);

const HEAD = `# Trials of this machine, written by Foldback; see the Bench tab. SI units. New trials are added at the end, and the
# newest of a kind is in force until it expires. Nothing here is ever changed: to undo a trial, make it again.
`;

/** Reads a companion. That there is none yet is no fault. */
export const readCompanion = (path: string): CompanionResult => {
  const read = textOf(path);
  return read.ok ? parseCompanion(read.text ?? '', path) : read;
};

/**
 * Adds one trial at the end, on disk when this resolves; all that was there stays to the letter. Rejects, leaving the file
 * as it was, where it cannot be understood or written.
 */
export const appendTrial = (path: string, record: TrialRecord): Promise<void> => {
  const key = resolve(path);
  // One after the other: of two that both started from the same file, the later would drop the earlier's trial.
  const added = (underWay.get(key) ?? Promise.resolve()).then(() => addTo(path, record));
  const settled = added
    .catch(() => {})
    .then(() => {
      if (underWay.get(key) === settled) underWay.delete(key);
    });
  underWay.set(key, settled);
  return added;
};
const underWay = new Map<string, Promise<void>>();

const addTo = async (path: string, record: TrialRecord): Promise<void> => {
  const before = textOf(path);
  if (!before.ok) throw new Error(before.errors.join(' '));
  const text = before.text ?? '';
  const present = parseCompanion(text, path);
  if (!present.ok) throw new Error(present.errors.join(' '));
  const kept = text.trim() === '' ? HEAD : text.replace(/\n*$/, '\n');
  const fresh = `${path}.${randomUUID().slice(0, 8)}`;
  await mkdir(dirname(path), { recursive: true });
  await writeNewFile(fresh, `${kept}${stringify([record])}`);
  try {
    const after = parseCompanion(readFileSync(fresh, 'utf8'), path);
    if (!after.ok || after.records.length !== present.records.length + 1)
      throw new Error(`${path} could not be added to without changing it; the trial was not saved.`);
    const meanwhile = textOf(path);
    if (!meanwhile.ok || meanwhile.text !== before.text)
      throw new Error(
        `${path} was changed by another program meanwhile; the trial was not saved. Save it again.`,
      );
    await rename(fresh, path);
  } catch (error) {
    await rm(fresh, { force: true });
    throw error;
  }
  await syncFolder(dirname(path));
};

type Text = { readonly ok: true; readonly text: string | null } | (CompanionResult & { readonly ok: false });

/** The text of a companion; null while there is none. */
const textOf = (path: string): Text => {
  try {
    return { ok: true, text: readFileSync(path, 'utf8') };
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException;
    if (code === 'ENOENT') return { ok: true, text: null };
    return {
      ok: false,
      errors: [`${path}: cannot be read (${code ?? String(error)}). Give it back, or move it away.`],
    };
  }
};

const parseCompanion = (text: string, path: string): CompanionResult => {
  const lines = new LineCounter();
  const document = parseDocument(text, { lineCounter: lines });
  const [broken] = document.errors;
  if (broken !== undefined)
    return {
      ok: false,
      errors: [`${path}:${broken.linePos?.[0].line ?? 1}: not valid YAML: ${broken.message.split('\n')[0]}`],
    };
  const list: unknown = document.toJS() ?? [];
  if (!Array.isArray(list))
    return { ok: false, errors: [`${path}:1: must be a list of trials (found ${typeof list}).`] };
  const parsed = list.map((entry) => trialRecordSchema.safeParse(entry));
  const errors = parsed.flatMap(({ error }, i) =>
    (error?.issues ?? []).map((issue) => {
      const line = lineOf(document, lines, [i, ...issue.path]);
      return `${path}:${line}: trial ${i + 1}: ${issue.path.join('.') || 'entry'}: ${issue.message}`;
    }),
  );
  if (errors.length > 0) return { ok: false, errors };
  return { ok: true, records: parsed.map((one) => one.data as TrialRecord) };
};

/** Line of a key's value, or of the nearest that stands around it. */
const lineOf = (
  document: ReturnType<typeof parseDocument>,
  lines: LineCounter,
  path: readonly PropertyKey[],
): number => {
  for (let depth = path.length; depth > 0; depth--) {
    const node = document.getIn(path.slice(0, depth), true);
    if (isNode(node) && node.range != null) return lines.linePos(node.range[0]).line;
  }
  return 1;
};
