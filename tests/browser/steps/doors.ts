import type { Page } from 'playwright-core';

/** Signs a staff member in through the page and waits for the Desk. */
export async function signIn(page: Page, url: string, email: string, password: string): Promise<void> {
  await page.goto(`${url}/sign-in`);
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.waitForURL('**/desk');
}

/** A student comes back with the PIN and waits for the bench. */
export async function comeBack(
  page: Page,
  url: string,
  student: { code: string; bench: number; nickname: string; pin: string },
): Promise<void> {
  await page.goto(`${url}/return`);
  await page.getByLabel('Class code').fill(student.code);
  await page.getByLabel('Bench', { exact: true }).fill(String(student.bench));
  await page.getByLabel('Nickname or roster number').fill(student.nickname);
  await page.getByLabel('PIN', { exact: true }).fill(student.pin);
  await page.getByRole('button', { name: 'Come back' }).click();
  await page.waitForURL('**/bench');
}
