import { expect, expectAccessible, expectNoSidewaysScroll, PEOPLE, signIn, test } from './fixtures/stillroom';

const PAGES = [
  ['/', 'Rooms'],
  ['/racks', 'Racks'],
  ['/batches', 'Batches'],
  ['/pour', 'Pour'],
  ['/alerts', 'Alerts'],
  ['/materials', 'Materials'],
  ['/compare', 'Compare'],
  ['/settings/account', 'Settings'],
  ['/settings/studios', 'Settings'],
  ['/settings/rooms', 'Settings'],
  ['/settings/racks', 'Settings'],
  ['/settings/sensors', 'Settings'],
  ['/settings/people', 'Settings'],
  ['/settings/audit', 'Settings'],
] as const;

test.describe('every page', () => {
  for (const [face, width] of [
    ['light', 1440],
    ['dark', 390],
    ['dark', 1440],
    ['light', 390],
  ] as const) {
    test(`has no fault a machine can find, ${face}, ${width} px`, async ({ browser }) => {
      test.setTimeout(120_000);
      const context = await browser.newContext({
        colorScheme: face,
        viewport: { width, height: 900 },
        reducedMotion: 'reduce',
        bypassCSP: true,
      });
      const page = await context.newPage();
      const faults: string[] = [];
      page.on('pageerror', (error) => faults.push(String(error)));
      page.on('console', (message) => {
        if (message.type() === 'error') faults.push(message.text());
      });
      await page.goto('/sign-in');
      await expectAccessible(page);
      await page.goto('/forgot-password');
      await expectAccessible(page);
      await signIn(page, PEOPLE.owner);
      // Signing in shows one refused refresh at most; from here on nothing may fail.
      faults.length = 0;
      for (const [path, heading] of PAGES) {
        await test.step(path, async () => {
          await page.goto(path);
          await expect(page.getByRole('heading', { level: 1, name: heading })).toBeVisible();
          await expect(page.getByText('Loading…')).toHaveCount(0);
          await expectAccessible(page);
          await expectNoSidewaysScroll(page);
        });
      }
      await test.step('a room', async () => {
        await page.goto('/');
        await page.getByRole('link', { name: 'Cellar', exact: true }).click();
        await expect(page.getByRole('heading', { level: 1, name: 'Cellar' })).toBeVisible();
        await page.locator('sr-chart-shell').first().scrollIntoViewIfNeeded();
        await expect(page.locator('sr-room-chart canvas').first()).toBeVisible();
        await expectAccessible(page);
        await expectNoSidewaysScroll(page);
      });
      await test.step('a batch', async () => {
        await page.goto('/batches');
        await page.getByRole('row').nth(1).getByRole('link').click();
        await expect(page.getByRole('heading', { name: 'The numbers behind the date' })).toBeVisible();
        await expectAccessible(page);
        await expectNoSidewaysScroll(page);
      });
      await test.step('an alert and the rules of its room', async () => {
        await page.goto('/alerts');
        await page
          .getByRole('link', { name: /Loft.*Too warm/ })
          .first()
          .click();
        await expect(page.getByRole('heading', { name: 'What happened' })).toBeVisible();
        await expectAccessible(page);
        await expectNoSidewaysScroll(page);
        await page.getByRole('link', { name: 'Its rules' }).click();
        await expect(page.getByRole('heading', { level: 1, name: 'Alert rules' })).toBeVisible();
        await expect(page.getByLabel('Watched').first()).toBeVisible();
        await expectAccessible(page);
        await expectNoSidewaysScroll(page);
      });
      expect(faults).toEqual([]);
      await context.close();
    });
  }
});
