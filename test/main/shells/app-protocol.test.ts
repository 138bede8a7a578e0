import { describe, expect, it } from 'vitest';
import { answerAppRequest } from '../../../main/shells/app-protocol.ts';
import { PICTURE, SCREEN, screenAndStills } from './a-shell.ts';

const ask = async (address: string, method = 'GET') => {
  const { screen, mission } = await screenAndStills();
  return answerAppRequest(new Request(address, { method }), screen, () => mission);
};

describe('the scheme of the window', () => {
  it('serves the screen, which may load nothing from elsewhere', async () => {
    const reply = await ask('foldback://console/index.html');
    expect([reply.status, await reply.text()]).toEqual([200, SCREEN]);
    const policy = reply.headers.get('content-security-policy') ?? '';
    expect(policy).toContain("default-src 'none'");
    expect(policy).not.toMatch(/unsafe|\*|https?:/);
  });

  it('serves the pictures of the mission', async () => {
    const reply = await ask('foldback://console/stills/001-ab12.jpg');
    expect([reply.status, Buffer.from(await reply.arrayBuffer())]).toEqual([200, PICTURE]);
  });

  it.each([
    '/../secret.json',
    '/%2e%2e%2fsecret.json',
    '/..%5csecret.json',
    '/stills/..%2fsecret.jpg',
    '/nothing.js',
  ])('has nothing for %s', async (path) => {
    expect((await ask(`foldback://console${path}`)).status).toBe(404);
  });

  it('answers no other host and no other method', async () => {
    expect((await ask('foldback://elsewhere/index.html')).status).toBe(403);
    expect((await ask('foldback://console/index.html', 'POST')).status).toBe(403);
  });
});
