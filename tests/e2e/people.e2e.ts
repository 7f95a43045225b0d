import { AxeBuilder } from '@axe-core/playwright';
import { type Browser, expect, type Page, test } from '@playwright/test';

const PASSWORD = 'four words nobody tries';

async function signInAsAdministrator(page: Page): Promise<void> {
  await page.goto('/office/people');
  await page.getByRole('button', { name: /^Administrator / }).click();
  await expect(page.getByRole('heading', { name: 'People' })).toBeVisible();
}

async function openElsewhere(browser: Browser, baseURL: string | undefined): Promise<Page> {
  const context = await browser.newContext({ colorScheme: 'dark', ...(baseURL ? { baseURL } : {}) });
  return context.newPage();
}

async function expectAccessible(page: Page): Promise<void> {
  const { violations } = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa']).analyze();
  expect(violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html).join(' ')}`)).toEqual([]);
}

/** A name of its own for every attempt: the server outlives a failed test. */
const invitee = () => ({ name: 'Ada Newcomer', email: `ada.${Date.now()}@orlavane.example` });

test('an administrator invites somebody, who sets a password, signs in and is out at once when deactivated', async ({ page, browser, baseURL }) => {
  const { name, email } = invitee();
  await signInAsAdministrator(page);
  await page.getByRole('button', { name: 'Invite somebody' }).click();
  await page.getByRole('button', { name: 'Send invitation' }).click();
  await expect(page.getByText('Choose at least one role')).toBeVisible();
  await expectAccessible(page);
  await page.getByLabel('Name', { exact: true }).fill(name);
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel(/^Planner/).check();
  await page.getByRole('button', { name: 'Send invitation' }).click();
  await expect(page.getByText(`${name} is invited`)).toBeVisible();
  await expectAccessible(page);

  await page.goto('/office/outbox');
  await page.getByRole('button', { name: new RegExp(`Read the mail to ${email}`) }).click();
  const link = await page.getByRole('link', { name: /set-password/ }).getAttribute('href');
  await expectAccessible(page);

  const theirs = await openElsewhere(browser, baseURL);
  await theirs.goto(new URL(link!).pathname);
  await expect(theirs.getByText(email)).toBeVisible();
  await expectAccessible(theirs);
  await theirs.getByLabel('New password').fill('short');
  await theirs.getByRole('button', { name: 'Set password' }).click();
  await expect(theirs.getByText('At least 12 characters', { exact: true })).toBeVisible();
  await theirs.getByLabel('New password').fill(PASSWORD);
  await theirs.getByRole('button', { name: 'Set password' }).click();
  await expect(theirs.getByText('Your password is set')).toBeVisible();
  await expect(theirs.getByLabel('E-mail')).toHaveValue(email);
  await theirs.getByLabel('Password', { exact: true }).fill(PASSWORD);
  await theirs.getByRole('button', { name: 'Sign in', exact: true }).click();
  await expect(theirs.getByRole('button', { name })).toBeVisible();

  await page.goto(`/office/people?search=${encodeURIComponent(email)}`);
  await page.getByRole('button', { name: `Edit ${name}` }).click();
  await page.getByRole('button', { name: 'Deactivate' }).click();
  await page.getByRole('button', { name: `Deactivate ${name}` }).click();
  // Nobody reloads there: the open page hears that its session has ended.
  await expect(theirs.getByRole('heading', { name: 'Sign in' })).toBeVisible();

  await page.goto('/office/audit?kind=person');
  await expect(page.getByText('changed a person').first()).toBeVisible();
  await expectAccessible(page);
});

test('somebody changes the password and signs out everywhere', async ({ page, browser, baseURL }) => {
  await signInAsAdministrator(page);
  const { name, email } = invitee();
  const made = await page.request.post('/api/people', { data: { name, email, roles: ['coordinator'] } });
  expect(made.ok()).toBe(true);
  const { mails } = (await (await page.request.get('/api/outbox')).json()) as { mails: { id: string; to: string }[] };
  const { text } = (await (await page.request.get(`/api/outbox/${mails.find(({ to }) => to === email)!.id}`)).json()) as { text: string };
  const token = /set-password\/([\w-]+)/.exec(text)![1]!;

  const theirs = await openElsewhere(browser, baseURL);
  expect((await theirs.request.post('/api/session/password-set', { data: { token, newPassword: PASSWORD } })).ok()).toBe(true);
  await theirs.goto('/account');
  await theirs.getByLabel('E-mail').fill(email);
  await theirs.getByLabel('Password', { exact: true }).fill('not the password');
  await theirs.getByRole('button', { name: 'Sign in', exact: true }).click();
  await expect(theirs.getByText('You are not signed in')).toBeVisible();
  await expectAccessible(theirs);
  await theirs.getByLabel('Password', { exact: true }).fill(PASSWORD);
  await theirs.keyboard.press('Enter');
  await expect(theirs.getByRole('heading', { name, level: 1 })).toBeVisible();
  await expectAccessible(theirs);

  await theirs.getByLabel('Present password').fill('not the password');
  await theirs.getByLabel('New password').fill('another four words here');
  await theirs.getByRole('button', { name: 'Change password' }).click();
  await expect(theirs.getByText('This is not your present password')).toBeVisible();
  await theirs.getByLabel('Present password').fill(PASSWORD);
  await theirs.getByRole('button', { name: 'Change password' }).click();
  await expect(theirs.getByText('Your password is changed')).toBeVisible();
  await theirs.getByRole('button', { name: 'Sign out everywhere' }).click();
  await theirs.getByRole('dialog').getByRole('button', { name: 'Sign out everywhere' }).click();
  await expect(theirs.getByRole('heading', { name: 'Sign in' })).toBeVisible();
});
