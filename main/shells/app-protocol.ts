import { contentSecurityPolicy, readStatic, readStill } from './static-files.ts';

export const SCHEME = 'foldback';
/** The only origin there is in the window. */
export const APP_ORIGIN = `${SCHEME}://console`;
export const START_PAGE = `${APP_ORIGIN}/index.html`;

/** Whether an address belongs to our own page, by origin and not by how it begins. */
export const isOurs = (address: string): boolean => {
  try {
    const { protocol, host } = new URL(address);
    return protocol === `${SCHEME}:` && host === 'console';
  } catch {
    return false;
  }
};

const STILLS = '/stills/';

/** Answers `foldback://console/…`: the renderer's files, and the pictures of the mission under `/stills/`. */
export const answerAppRequest = async (
  request: Request,
  rendererDir: string,
  missionFolder: () => string,
): Promise<Response> => {
  if (request.method !== 'GET' || !isOurs(request.url)) return new Response(null, { status: 403 });
  const path = new URL(request.url).pathname;
  const file = path.startsWith(STILLS)
    ? await readStill(missionFolder(), path.slice(STILLS.length))
    : await readStatic(rendererDir, path);
  if (file === null) return new Response('There is no such file.\n', { status: 404 });
  return new Response(new Uint8Array(file.bytes), {
    headers: {
      'Content-Type': file.type,
      'Content-Security-Policy': contentSecurityPolicy("'self'"),
      'X-Content-Type-Options': 'nosniff',
      'Referrer-Policy': 'no-referrer',
      'Cache-Control': 'no-store',
    },
  });
};
