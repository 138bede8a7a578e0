import { join } from 'node:path';
import { expect, test } from './browser-test.ts';
import { freshConsole, operatorOf } from './operator.ts';

// Pictures of every tab in both themes and two sizes, to be looked at, and what a look can be held to.

const SCREENS = join(import.meta.dirname, '../screenshots');
const SIZES = [
  { width: 1280, height: 800 },
  { width: 1920, height: 1080 },
] as const;

const console_ = freshConsole('screens');

test('Stop and every reading stay on screen on every tab, in both themes and sizes, and Drive never scrolls', async ({
  page,
}) => {
  test.setTimeout(240_000);
  const operator = operatorOf(page);
  await page.goto(console_.address());
  await expect(operator.status('Link')).toContainText('open');
  await operator.growTo(3.4);
  await operator.button('Mark branch point').click();
  await operator.button('Mark it').click();
  await expect(operator.alert()).toContainText('marked');
  await operator.growTo(4);
  await operator.button('Log waypoint').click();
  await expect(operator.alert()).toContainText('Waypoint 1 logged');
  // Stop and the readings stay in reach under every dialog, for pointer and screen reader alike.
  for (const name of ['Mark branch point', 'Keys and cautions', /^Alarms/]) {
    await page.getByRole('button', { name }).click();
    await expect(page.getByRole('dialog')).toBeVisible();
    await expect(operator.status('Tail tension')).toBeInViewport({ ratio: 1 });
    await operator.button('Stop').click();
    await expect(page.getByRole('dialog')).toBeHidden();
  }
  // A remedy chosen shows its outlook beside the present one.
  const remedy = page.getByRole('group', { name: 'What would help' }).getByRole('button').nth(1);
  await remedy.click();
  await expect(remedy).toHaveAttribute('aria-pressed', 'true');
  for (const theme of ['day', 'night']) {
    for (const size of SIZES) {
      await page.setViewportSize(size);
      for (const tab of ['Drive', 'Path', 'Review', 'Bench', 'Rig']) {
        await operator.openTab(tab);
        await expect(operator.button('Stop')).toBeInViewport({ ratio: 1 });
        for (const name of ['Body length', 'Body pressure', 'Tail tension', 'Way back', 'Link', 'Recording'])
          await expect(operator.status(name)).toBeInViewport({ ratio: 1 });
        if (tab === 'Drive')
          for (const name of ['Grow', 'Retract', 'Mark branch point', 'Log waypoint', 'Backtrack'])
            await expect(operator.button(name)).toBeInViewport({ ratio: 1 });
        const scrolls = await page.evaluate(
          () =>
            document.documentElement.scrollHeight > window.innerHeight ||
            document.documentElement.scrollWidth > window.innerWidth,
        );
        expect(scrolls, `${tab} in ${theme} at ${size.width}`).toBe(false);
        await page.waitForTimeout(500);
        await page.screenshot({
          path: join(SCREENS, `${tab.toLowerCase()}-${theme}-${size.width}x${size.height}.png`),
        });
      }
    }
    if (theme === 'day') await operator.button('Night colours').click();
  }
});
