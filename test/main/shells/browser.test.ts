import { describe, expect, it } from 'vitest';
import type { WebSocket } from 'ws';
import {
  ask,
  connect,
  exchange,
  keyOf,
  PICTURE,
  SCREEN,
  screenAndStills,
  sessionOf,
  shellOver,
} from './a-shell.ts';
import { consoleStandIn } from './console-stand-in.ts';

const start = async () => {
  const { screen, mission } = await screenAndStills();
  const console_ = consoleStandIn(mission);
  const shell = await shellOver(console_, screen);
  return { console_, shell, port: shell.port, origin: `http://127.0.0.1:${shell.port}` };
};

describe('the screen over HTTP', () => {
  it('is served on the loopback address under both of its names', async () => {
    const { port } = await start();
    for (const host of [`127.0.0.1:${port}`, `localhost:${port}`]) {
      const reply = await ask(port, '/', { headers: { Host: host } });
      expect([reply.status, reply.body.toString()]).toEqual([200, SCREEN]);
    }
  });

  it('may load and connect to nothing but this server', async () => {
    const { port } = await start();
    const { headers } = await ask(port, '/');
    const policy = Object.fromEntries(
      String(headers['content-security-policy'])
        .split('; ')
        .map((rule) => [rule.split(' ')[0], rule.split(' ').slice(1)]),
    );
    expect(policy['default-src']).toEqual(["'none'"]);
    expect(policy['script-src']).toEqual(["'self'"]);
    expect(policy['connect-src']).toEqual(["'self'", `ws://127.0.0.1:${port}`]);
    expect(headers['x-content-type-options']).toBe('nosniff');
    expect(headers['referrer-policy']).toBe('no-referrer');
  });

  it('invites no page of another origin', async () => {
    const { port } = await start();
    const { headers } = await ask(port, '/', { headers: { Origin: 'http://elsewhere.example' } });
    expect(Object.keys(headers).filter((name) => name.startsWith('access-control-'))).toEqual([]);
  });

  // A name elsewhere that was made to point at this computer (DNS rebinding) arrives in Host.
  it.each([
    ['a foreign name', () => 'elsewhere.example'],
    ['a foreign name with our port', (port: number) => `elsewhere.example:${port}`],
    ['our address with another port', (port: number) => `127.0.0.1:${port + 1}`],
    ['our address without a port', () => '127.0.0.1'],
    ['our address as the beginning of a name', (port: number) => `127.0.0.1.elsewhere.example:${port}`],
  ])('refuses a request whose Host is %s', async (_, host) => {
    const { port } = await start();
    const reply = await ask(port, '/', { headers: { Host: host(port) } });
    expect(reply.status).toBe(421);
    expect(reply.body.toString()).not.toContain('Foldback');
  });

  it.each([
    '/../secret.json',
    '/%2e%2e/secret.json',
    '/..%2fsecret.json',
    '/..%5csecret.json',
    '/assets/../../secret.json',
    '//secret.json/../../secret.json',
    '/index.html%00.json',
    '/%',
    '/etc/passwd',
  ])('gives nothing outside its folder for %s', async (path) => {
    const { port } = await start();
    const reply = await ask(port, path);
    expect([reply.status, reply.body.toString()]).toEqual([404, 'There is no such file.\n']);
  });

  it.each(['PUT', 'DELETE', 'OPTIONS', 'POST'])('does not answer %s', async (method) => {
    const { port, origin } = await start();
    expect((await ask(port, '/', { method, headers: { Origin: origin } })).status).toBe(405);
  });
});

describe('the key in the address', () => {
  it('opens one session with a cookie that scripts and other sites do not get', async () => {
    const { shell, port } = await start();
    const reply = await exchange(port, keyOf(shell));
    expect(reply.status).toBe(204);
    const attributes = (reply.headers['set-cookie']?.[0] ?? '').split('; ').slice(1);
    expect(attributes).toEqual(expect.arrayContaining(['HttpOnly', 'SameSite=Strict']));
  });

  it('has at least 128 random bits', async () => {
    const { shell } = await start();
    expect(Buffer.from(keyOf(shell), 'base64url').length).toBeGreaterThanOrEqual(16);
    expect(keyOf(shell)).not.toBe(keyOf(shell));
  });

  it('is refused when it was used before', async () => {
    const { shell, port } = await start();
    const key = keyOf(shell);
    await exchange(port, key);
    expect((await exchange(port, key)).status).toBe(403);
  });

  it.each([
    ['a wrong key', 'A'.repeat(32)],
    ['an empty key', ''],
    ['no key', undefined],
    ['a number', 1],
    ['a list', []],
  ])('is refused when it is %s', async (_, key) => {
    const { port } = await start();
    const reply = await exchange(port, key);
    expect([reply.status, reply.headers['set-cookie']]).toEqual([403, undefined]);
  });

  it('is refused, unused, to a page of another origin or of none', async () => {
    const { shell, port } = await start();
    const key = keyOf(shell);
    const body = JSON.stringify({ key });
    const foreign = [
      'http://elsewhere.example',
      `http://127.0.0.1:${port + 1}`,
      `https://127.0.0.1:${port}`,
      'null',
    ];
    for (const origin of foreign) expect((await exchange(port, key, { Origin: origin })).status).toBe(403);
    expect((await ask(port, '/session', { method: 'POST', body })).status).toBe(403);
    expect((await exchange(port, key)).status).toBe(204);
  });

  it('is refused in a request that is too large or not JSON', async () => {
    const { port, origin } = await start();
    const send = (body: string) =>
      ask(port, '/session', { method: 'POST', headers: { Origin: origin }, body });
    expect((await send(JSON.stringify({ key: 'A'.repeat(5000) }))).status).toBe(413);
    expect((await send('{"key":')).status).toBe(403);
    expect((await send('null')).status).toBe(403);
  });

  it('names the cookie by port, so that two consoles on one computer keep theirs apart', async () => {
    const [one, other] = [await start(), await start()];
    const names = [await sessionOf(one.shell), await sessionOf(other.shell)].map(
      (cookie) => cookie.split('=')[0],
    );
    expect(new Set(names).size).toBe(2);
  });
});

describe('the pictures of the mission', () => {
  it('are given to a session', async () => {
    const { shell, port } = await start();
    const reply = await ask(port, '/stills/001-ab12.jpg', { headers: { Cookie: await sessionOf(shell) } });
    expect([reply.status, reply.headers['content-type'], reply.body]).toEqual([200, 'image/jpeg', PICTURE]);
  });

  it('are refused without a session', async () => {
    const { port } = await start();
    const forged = { Cookie: `foldback_session_${port}=${'A'.repeat(32)}` };
    expect((await ask(port, '/stills/001-ab12.jpg')).status).toBe(403);
    expect((await ask(port, '/stills/001-ab12.jpg', { headers: forged })).status).toBe(403);
  });

  it.each(['../secret.jpg', '..%2fsecret.jpg', '001-ab12.jpg%00', '', 'manifest.json'])(
    'are nothing but pictures: "%s" is refused',
    async (name) => {
      const { shell, port } = await start();
      expect(
        (await ask(port, `/stills/${name}`, { headers: { Cookie: await sessionOf(shell) } })).status,
      ).toBe(404);
    },
  );
});

describe('a window that asks for the console', () => {
  it('joins with a session from our own page', async () => {
    const { shell, port, origin, console_ } = await start();
    const socket = await connect(port, { Origin: origin, Cookie: await sessionOf(shell) });
    expect((socket as WebSocket).readyState).toBe(1);
    expect(console_.joined).toHaveLength(1);
  });

  it.each<[string, (port: number, cookie: string) => [Record<string, string>, string?]]>([
    ['without a session', (port) => [{ Origin: `http://127.0.0.1:${port}` }]],
    [
      'with a forged session',
      (port) => [{ Origin: `http://127.0.0.1:${port}`, Cookie: `foldback_session_${port}=x` }],
    ],
    ['from a foreign page', (_, cookie) => [{ Origin: 'http://elsewhere.example', Cookie: cookie }]],
    [
      'from a page on another port',
      (port, cookie) => [{ Origin: `http://127.0.0.1:${port + 1}`, Cookie: cookie }],
    ],
    ['without an origin', (_, cookie) => [{ Cookie: cookie }]],
    [
      'under a foreign name',
      (port, cookie) => [
        { Host: `elsewhere.example:${port}`, Origin: `http://elsewhere.example:${port}`, Cookie: cookie },
      ],
    ],
    [
      'at another path',
      (port, cookie) => [{ Origin: `http://127.0.0.1:${port}`, Cookie: cookie }, '/console/x'],
    ],
  ])('is refused %s', async (_, how) => {
    const { shell, port, console_ } = await start();
    const [headers, path] = how(port, await sessionOf(shell));
    expect(await connect(port, headers, path === undefined ? {} : { path })).toBe(403);
    expect(console_.joined).toEqual([]);
  });

  it('is refused when too many are connected, until one leaves', async () => {
    const { shell, port, origin, console_ } = await start();
    const headers = { Origin: origin, Cookie: await sessionOf(shell) };
    const opened: (WebSocket | number)[] = [];
    while (typeof opened.at(-1) !== 'number' && opened.length < 100)
      opened.push(await connect(port, headers));
    expect(opened.pop()).toBe(503);
    (opened[0] as WebSocket).close();
    await expect.poll(() => console_.left.length).toBe(1);
    expect(typeof (await connect(port, headers))).toBe('object');
  });
});
