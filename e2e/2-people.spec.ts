import { expect, PEOPLE, signIn, test } from './fixtures/stillroom';

test('a wrong password is refused in words, and nobody gets in without signing in', async ({ page }) => {
  await page.goto('/racks');
  await expect(page.getByRole('heading', { name: /sign in/i })).toBeVisible();
  await page.getByLabel('E-mail').fill(PEOPLE.lead.email);
  await page.getByLabel('Password', { exact: true }).fill('not the password');
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page.getByRole('alert')).toContainText(/password|e-mail/i);
});

test('a viewer reads what is ready when, and sees no recipe, no alerts, no people', async ({ page }) => {
  const bodies: string[] = [];
  page.on('response', (response) => {
    if (response.url().includes('/api/'))
      void response.text().then(
        (text) => bodies.push(text),
        () => undefined,
      );
  });
  await signIn(page, PEOPLE.viewer);
  await expect(page.getByText('High Barn')).toHaveCount(0);
  for (const name of ['Alerts', 'Pour', 'Materials', 'Compare']) {
    await expect(page.getByRole('link', { name: new RegExp(`^${name}`) })).toHaveCount(0);
  }
  await page.goto('/batches');
  await page.getByRole('row').nth(1).getByRole('link').click();
  await expect(page.getByRole('heading', { name: 'Ship' })).toBeVisible();
  await expect(page.getByRole('heading', { name: 'What was poured' })).toHaveCount(0);
  await expect(page.getByRole('button', { name: /Move|Dispatch|Scrap|Sign/ })).toHaveCount(0);
  for (const path of ['/alerts', '/pour', '/materials', '/settings/people']) {
    await page.goto(path);
    await expect(page.getByRole('heading', { level: 1, name: 'Rooms' })).toBeVisible();
  }
  const all = bodies.join('\n');
  expect(all.length).toBeGreaterThan(1000);
  for (const secret of ['Meadow soy', 'Fig Leaf', 'Cedar Hall', 'soy-container', 'Tomas Wren', 'Cotton']) {
    expect(all).not.toContain(secret);
  }
});

test('an invitation goes out by mail and is accepted', async ({ page, browser, desk }) => {
  const email = 'orrin@larkrise.example';
  await signIn(page, PEOPLE.owner);
  await page.goto('/settings/people');
  await page.getByRole('button', { name: 'Invite somebody' }).click();
  await page.getByRole('textbox', { name: 'E-mail' }).fill(email);
  await page.getByRole('combobox', { name: 'High Barn' }).click();
  await page.getByRole('option', { name: /^maker/ }).click();
  await page.getByRole('button', { name: 'Send the invitation' }).click();
  await expect(page.getByRole('row', { name: new RegExp(email) })).toContainText('invited');
  await expect.poll(async () => (await desk.mails(email)).length).toBe(1);
  const [mail] = await desk.mails(email);
  const link = /https?:\/\/\S+\/invitation\/\S+/.exec(mail?.text ?? '')?.[0] ?? '';
  const context = await browser.newContext();
  const invited = await context.newPage();
  await invited.goto(new URL(link).pathname);
  await invited.getByLabel('Your name').fill('Orrin Vale');
  await invited.getByLabel('Password', { exact: true }).fill('a long enough sentence');
  await invited.getByRole('button', { name: 'Accept' }).click();
  await expect(invited.getByRole('heading', { level: 1, name: 'Rooms' })).toBeVisible();
  await expect(invited.getByRole('heading', { name: /^High Barn/ })).toBeVisible();
  await expect(invited.getByText('Quay Street')).toHaveCount(0);
  await context.close();
});

test('a role that is taken away ends the session at once', async ({ page, browser }) => {
  const context = await browser.newContext();
  const maker = await context.newPage();
  await signIn(maker, PEOPLE.maker);
  await signIn(page, PEOPLE.owner);
  await page.goto('/settings/people');
  const row = page.getByRole('row', { name: new RegExp(PEOPLE.maker.email) });
  await row.getByRole('button', { name: /^Disable/ }).click();
  await page.getByRole('dialog').getByRole('button', { name: 'Disable' }).click();
  await expect(maker.getByRole('heading', { name: /sign in/i })).toBeVisible();
  await row.getByRole('button', { name: /^Enable/ }).click();
  await page.getByRole('dialog').getByRole('button', { name: 'Enable' }).click();
  await expect(row).toContainText('active');
  await context.close();
});
