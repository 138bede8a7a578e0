import { readFile } from 'node:fs/promises';
import { extname, join, normalize, sep } from 'node:path';

const TYPES: Readonly<Record<string, string>> = {
  '.html': 'text/html; charset=utf-8',
  '.js': 'text/javascript; charset=utf-8',
  '.css': 'text/css; charset=utf-8',
  '.svg': 'image/svg+xml',
  '.png': 'image/png',
  '.jpg': 'image/jpeg',
  '.woff2': 'font/woff2',
  '.json': 'application/json',
};

/** Nothing from elsewhere, nothing inline. */
export const contentSecurityPolicy = (connect: string): string =>
  [
    "default-src 'none'",
    "script-src 'self'",
    "style-src 'self'",
    "img-src 'self' blob: data:",
    "media-src 'self' blob:",
    "font-src 'self'",
    `connect-src ${connect}`,
    "base-uri 'none'",
    "form-action 'none'",
    "frame-ancestors 'none'",
  ].join('; ');

export interface StaticFile {
  readonly type: string;
  readonly bytes: Buffer;
}

/** A file below `root` by its URL path, or null: outside the root, of an unknown kind, or not there. */
export const readStatic = async (root: string, urlPath: string): Promise<StaticFile | null> => {
  const decoded = safeDecode(urlPath);
  if (decoded === null || decoded.includes('\0')) return null;
  const path = normalize(join(root, decoded === '/' ? 'index.html' : decoded));
  if (!path.startsWith(normalize(root) + sep)) return null;
  const type = TYPES[extname(path)];
  if (type === undefined) return null;
  return readFile(path).then(
    (bytes) => ({ type, bytes }),
    () => null,
  );
};

/** Names the recorder gives to pictures; anything else is no still. */
const STILL_NAME = /^[0-9]{3,}-[0-9a-f]{4}\.jpg$/;

export const readStill = async (missionFolder: string, name: string): Promise<StaticFile | null> =>
  STILL_NAME.test(name) ? readStatic(join(missionFolder, 'stills'), `/${name}`) : null;

const safeDecode = (path: string): string | null => {
  try {
    return decodeURIComponent(path);
  } catch {
    return null;
  }
};
