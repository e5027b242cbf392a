import { expect, PEOPLE, runningParts, signIn, test } from './fixtures/stillroom';

test('a room grows too warm: the alert names the soy batches, mail arrives, it is acknowledged, the room cools, it clears', async ({
  page,
  desk,
}) => {
  test.setTimeout(240_000);
  await signIn(page, PEOPLE.lead);
  const cellar = page
    .getByRole('article', { name: 'Cellar' })
    .or(page.locator('sr-room-card', { hasText: 'Cellar' }))
    .first();
  await expect(cellar).toBeVisible();
  await desk.push('cellar', 'warmer');
  await desk.speed(600);
  await expect(cellar).toContainText(/Too warm for \d+ .*batch/, { timeout: 60_000 });
  const isOurs = ({ subject }: { subject: string }) => subject.startsWith('Quay Street, Cellar: Too warm');
  await expect
    .poll(async () => (await desk.mails(PEOPLE.lead.email)).some(isOurs), { timeout: 60_000 })
    .toBe(true);
  await desk.speed(1);
  const mail = (await desk.mails(PEOPLE.lead.email)).find(isOurs);
  expect(mail?.text).toMatch(/Batches: Q-\d+ \(Rack \d, shelf \d\)/);
  expect(mail?.text).toMatch(/limit 2[45]\.0 °C/);
  expect(mail?.text).toMatch(/cool the room by/);

  const link = new URL(/https?:\/\/\S+\/alerts\/\S+/.exec(mail?.text ?? '')?.[0] ?? '');
  await page.goto(link.pathname + link.search);
  await page.getByRole('button', { name: 'Acknowledge' }).click();
  await expect(page.getByText('Ines Aldous has it')).toBeVisible();
  await expect(page.getByRole('listitem').filter({ hasText: 'Acknowledged' })).toBeVisible();

  await desk.push('cellar', 'colder');
  await desk.speed(600);
  await expect(page.getByText(/^Over: too warm lasted/)).toBeVisible({ timeout: 90_000 });
  await desk.push('cellar', 'normal');
  await desk.speed(1);
  await expect
    .poll(async () =>
      (await desk.mails(PEOPLE.lead.email)).some(({ subject }) => subject === 'Over: Quay Street, Cellar'),
    )
    .toBe(true);
});

test('a batch is poured, placed, moved to a colder room, and its date moves', async ({ page }) => {
  await signIn(page, PEOPLE.owner);
  await page.goto('/pour');
  await page.getByRole('combobox', { name: 'Studio' }).click();
  await page.getByRole('option', { name: 'High Barn' }).click();
  await page.getByRole('combobox', { name: 'Design' }).click();
  await page.getByRole('option', { name: 'Cedar Hall in 75 mm' }).click();
  await page.getByLabel('Vessels').fill('6');
  await page.getByLabel('Pouring temperature').fill('58');
  await expect(page.getByText('8.0 % of wax = 7.4 % of mix')).toBeVisible();
  const threeDaysAgo = new Date(Date.now() - 3 * 86_400_000).toISOString().slice(0, 16);
  await page.getByLabel('Poured at').fill(threeDaysAgo);
  await page.getByRole('combobox', { name: 'Shelf' }).click();
  await page
    .getByRole('group', { name: /^North room/ })
    .getByRole('option')
    .last()
    .click();
  await page.getByRole('button', { name: 'Start the batch' }).click();
  await expect(page.getByRole('heading', { level: 1, name: /^H-\d+/ })).toBeVisible();
  const ship = page.getByRole('region', { name: 'Ship' });
  await expect(ship).toContainText('10 to 90 %');
  const before = await ship.innerText();

  await page.getByRole('button', { name: 'Move', exact: true }).click();
  await page.getByRole('combobox', { name: 'To which shelf' }).click();
  await page
    .getByRole('group', { name: /^South room/ })
    .getByRole('option')
    .first()
    .click();
  await page.getByLabel('Even if the shelf has no room for all of it').check();
  await page.getByRole('button', { name: 'Move', exact: true }).last().click();
  await expect(page.getByText(/^South room, Rack/)).toBeVisible();
  await expect(ship).toContainText('10 to 90 %');
  expect(await ship.innerText()).not.toBe(before);
});

test('a fragrance poured above its flash point is warned of', async ({ page }) => {
  await signIn(page, PEOPLE.maker);
  await page.goto('/pour');
  await page.getByRole('combobox', { name: 'Design' }).click();
  await page.getByRole('option', { name: 'Orange Peel in a tin' }).click();
  await page.getByLabel('Pouring temperature').fill('66');
  await expect(page.getByText(/at or above the flash point of Orange Peel/)).toBeVisible();
});

test('the page shows a lost connection and recovers by itself when the gateway was killed', async ({
  page,
}) => {
  await signIn(page, PEOPLE.lead);
  await expect(page.getByText(/live, last reading/)).toBeVisible();
  process.kill(runningParts().gateway, 'SIGKILL');
  await expect(page.getByText(/Connection lost/)).toBeVisible();
  await expect(page.getByText(/Connection lost/)).toHaveCount(0, { timeout: 30_000 });
  await expect(page.getByText(/live, last reading/)).toBeVisible();
});

test('the wall can be walked by keyboard', async ({ page }) => {
  await signIn(page, PEOPLE.lead);
  const wall = page.locator('sr-rack-wall').first();
  await wall.getByRole('link').first().focus();
  const first = await page.evaluate(() => document.activeElement?.textContent);
  await page.keyboard.press('ArrowRight');
  const second = await page.evaluate(() => document.activeElement?.textContent);
  expect(second).not.toBe(first);
  await page.keyboard.press('Enter');
  await expect(page.getByRole('heading', { name: 'Why the date moved' })).toBeVisible();
});
