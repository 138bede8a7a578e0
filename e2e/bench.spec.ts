import { readdir } from 'node:fs/promises';
import { expect, test } from './browser-test.ts';
import { freshConsole, operatorOf } from './operator.ts';

const console_ = freshConsole('bench');

test('a technician measures the tail against a tape, and after the next start it counts as measured', async ({
  page,
}) => {
  test.setTimeout(240_000);
  const operator = operatorOf(page);
  await page.goto(console_.address());
  await expect(operator.status('Link')).toContainText('open');
  const trial = page.getByRole('button', { name: /^Tail length against a tape/ });
  for (const metres of [0.5, 1, 1.5, 2]) {
    await operator.openTab('Drive');
    await operator.growTo(metres);
    await operator.openTab('Bench');
    if ((await trial.getAttribute('aria-pressed')) !== 'true') await trial.click();
    const payout = page.getByLabel('Payout as read, m');
    await expect(async () => {
      await operator.button('Take reading').click();
      await expect(payout).not.toHaveValue('', { timeout: 500 });
    }).toPass();
    // A tape that reads one part in a hundred more than half the payout.
    await page
      .getByLabel('Body length by tape, m')
      .fill((Number(await payout.inputValue()) * 0.505).toFixed(3));
    await operator.button('Add point').click();
  }
  const values = page.getByRole('table', { name: 'Values of the fit' });
  await expect(values).toContainText(/1\.0(09|10|11)/);
  await expect(operator.button('Save trial')).toBeDisabled();
  await page.getByLabel('Your initials').fill('qx');
  await operator.button('Save trial').click();
  await expect(operator.alert()).toContainText('Trial saved');
  await expect(trial).toContainText('in force from the next start');
  expect(await readdir(console_.missions())).toContain('built-in.bench.yaml');

  await console_.restart();
  await page.goto('about:blank');
  await page.goto(console_.address());
  await operator.openTab('Bench');
  await expect(trial).toContainText('measured, qx');
  await expect(page.getByText(/scale of the payout 1\.0/)).toBeVisible();
});
