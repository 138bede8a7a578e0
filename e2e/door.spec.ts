import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Page } from 'playwright';
import { type BrowserShell, listen, serveConsole } from '../main/shells/browser.ts';
import { type ConsoleProcess, forkConsole } from '../main/shells/console-process.ts';
import { expect, test } from './browser-test.ts';

// What a real browser makes of the browser shell's headers, cookie and checks, with a page of a few lines.

let folder: string;
let console_: ConsoleProcess;
let shell: BrowserShell;

const SCRIPT = `
const key = new URLSearchParams(location.hash.slice(1)).get('key');
const headers = { 'Content-Type': 'application/json' };
if (key) await fetch('./session', { method: 'POST', headers, body: JSON.stringify({ key }) });
const socket = new WebSocket('ws://' + location.host + '/console');
socket.onmessage = ({ data }) => {
  const message = JSON.parse(data);
  if (message.kind === 'hello') document.body.textContent = message.role;
};
socket.onclose = () => { document.body.textContent = 'closed'; };
`;

test.beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'foldback-door-'));
  await writeFile(
    join(folder, 'index.html'),
    '<!doctype html><title>x</title><body>waiting</body><script type="module" src="./page.js"></script>' +
      '<script>document.title = "inline"</script>',
  );
  await writeFile(join(folder, 'page.js'), SCRIPT);
  const missionsDir = join(folder, 'missions');
  console_ = await forkConsole({ rigFile: null, serialPath: null, missionsDir, seed: 1 });
  shell = serveConsole(await listen('127.0.0.1', 0), console_, { rendererDir: folder });
});
test.afterEach(async () => {
  await Promise.all([shell.close(), console_.close()]);
  await rm(folder, { recursive: true, force: true });
});

/** A page of another program on this computer, with this script. */
const foreignPage = async (script: string): Promise<{ address: string; close: () => void }> => {
  const server = createServer((_, response) => {
    response.setHeader('Content-Type', 'text/html');
    response.end(
      `<!doctype html><title>waiting</title><body></body><script type="module">${script}</script>`,
    );
  });
  await new Promise<void>((done) => server.listen(0, '127.0.0.1', done));
  const { port } = server.address() as AddressInfo;
  return { address: `http://127.0.0.1:${port}/`, close: () => server.close() };
};

const role = (page: Page): Promise<string | null> => page.locator('body').textContent();

test('the first window drives, a second tab of the same browser watches, and the key is good for one', async ({
  context,
}) => {
  const address = shell.url();
  const first = await context.newPage();
  await first.goto(address);
  await expect.poll(() => role(first)).toBe('driver');
  const second = await context.newPage();
  await second.goto(`http://127.0.0.1:${shell.port}/`);
  await expect.poll(() => role(second)).toBe('watcher');
});

test('a browser that comes second with the same address gets nothing', async ({ browser }) => {
  const address = shell.url();
  const [owner, thief] = [await browser.newContext(), await browser.newContext()];
  const first = await owner.newPage();
  await first.goto(address);
  await expect.poll(() => role(first)).toBe('driver');
  const other = await thief.newPage();
  await other.goto(address);
  await expect.poll(() => role(other)).toBe('closed');
  await Promise.all([owner.close(), thief.close()]);
});

test('the page runs no script that is written into it, and scripts do not see the cookie', async ({
  page,
}) => {
  await page.goto(shell.url());
  await expect.poll(() => role(page)).toBe('driver');
  expect(await page.title()).toBe('x');
  expect(await page.evaluate(() => document.cookie)).toBe('');
});

test('the page can send nothing elsewhere', async ({ page }) => {
  const elsewhere = await foreignPage('');
  await page.goto(shell.url());
  const outcome = await page.evaluate(async (address) => {
    const image = new Image();
    const loaded = new Promise<string>((done) => {
      image.onload = () => done('loaded');
      image.onerror = () => done('blocked');
    });
    image.src = address;
    return [
      await fetch(address, { mode: 'no-cors' }).then(
        () => 'sent',
        () => 'blocked',
      ),
      await loaded,
    ];
  }, elsewhere.address);
  elsewhere.close();
  expect(outcome).toEqual(['blocked', 'blocked']);
});

test('a page of another program on this computer, open in the same browser, gets no hold of the console', async ({
  context,
}) => {
  const ours = await context.newPage();
  await ours.goto(shell.url());
  await expect.poll(() => role(ours)).toBe('driver');
  const base = `http://127.0.0.1:${shell.port}`;
  const foreign = await foreignPage(`
    const socket = await new Promise((done) => {
      const one = new WebSocket('${base.replace('http', 'ws')}/console');
      one.onopen = () => done('open');
      one.onerror = () => done('refused');
    });
    const read = await fetch('${base}/', { credentials: 'include' }).then(() => 'read', () => 'refused');
    const session = await fetch('${base}/session', { method: 'POST', body: '{}' }).then(() => 'read', () => 'refused');
    const frame = document.createElement('iframe');
    frame.src = '${base}/';
    document.body.append(frame);
    await new Promise((done) => { frame.onload = done; });
    document.title = [socket, read, session].join(' ');
  `);
  const page = await context.newPage();
  await page.goto(foreign.address);
  await expect(page).toHaveTitle('refused refused refused');
  // The frame that was tried shows the browser's own error page: nothing of ours ran in it and joined.
  expect(page.frames().filter((frame) => frame.url().startsWith(base))).toEqual([]);
  expect(shell.windows()).toBe(1);
  foreign.close();
});

test('a window that is closed leaves its seat to the next', async ({ context }) => {
  const first = await context.newPage();
  await first.goto(shell.url());
  await expect.poll(() => role(first)).toBe('driver');
  await first.close();
  await expect.poll(() => shell.windows()).toBe(0);
  const next = await context.newPage();
  await next.goto(`http://127.0.0.1:${shell.port}/`);
  await expect.poll(() => role(next)).toBe('driver');
});
