import { expect, test } from '@playwright/test';
import { expectAccessible } from '../support/accessible';
import { signIn } from '../support/browser';
import { shoot } from '../support/screens';

const battery = '/notes/MN-001';

test('revisions are compared from the inputs that changed to the verdicts, without a script', async ({
	browser,
}) => {
	const context = await browser.newContext({
		viewport: { width: 1400, height: 900 },
		javaScriptEnabled: false,
	});
	const page = await context.newPage();
	await signIn(page, 'reader');
	await page.goto(`${battery}/revisions/B`);
	await page.getByRole('link', { name: 'Compare', exact: true }).click();
	await expect(page.getByRole('heading', { level: 1 })).toHaveText('Revision A to revision B');
	const inputs = page.getByRole('region', { name: 'Inputs that changed' });
	await expect(inputs).toContainText(/30\sV\s*now 32\sV/);
	await expect(inputs).toContainText(/\+2\sV\s*\+6\.67\s%/);
	const results = page.getByRole('region', { name: 'Results that moved' });
	await expect(results).toContainText('R');
	await expect(results).toContainText('uncertainty');
	const text = page.getByRole('region', { name: 'Text that differs' });
	await expect(text.getByRole('insertion').first()).toContainText('inserted:');
	await expect(text.getByRole('deletion').first()).toContainText('deleted:');
	await expect(page.getByRole('region', { name: 'Signed' })).toContainText('Approved by');
	await shoot(page, 'comparison');

	await text.getByRole('link', { name: 'In one column' }).click();
	await expect(page).toHaveURL(/view=one/);
	await expect(text.getByRole('link', { name: 'In one column' })).toHaveAttribute(
		'aria-current',
		'true',
	);
	// A reader is offered what is frozen, and the other way round is one more link.
	await expect(page.getByLabel('From').getByRole('option')).toHaveText([
		/^Revision A/,
		/^Revision B/,
	]);
	await page.getByRole('link', { name: 'Exchange sides' }).click();
	await expect(inputs).toContainText(/−2\sV\s*−6\.25\s%/);
	const refused = await page.goto(`${battery}/compare?from=A&to=working-copy`);
	expect(refused?.status()).toBe(404);
	await context.close();
});

test('the working copy is compared with a returned candidate, and the sides are chosen', async ({
	page,
}) => {
	await signIn(page, 'engineer');
	await page.goto('/notes/MN-002/compare');
	await expect(page.getByRole('heading', { level: 1 })).toHaveText('Candidate 1 to working copy');
	await expect(page.getByText('Both sides say the same')).toBeVisible();
	await page.goto(battery);
	await page.getByRole('link', { name: 'Changes since B' }).click();
	await expect(page.getByRole('heading', { level: 1 })).toHaveText('Revision B to working copy');
	await page.getByLabel('From').selectOption('A');
	await page.getByRole('button', { name: 'Compare', exact: true }).click();
	await expect(page.getByRole('heading', { level: 1 })).toHaveText('Revision A to working copy');
	await page.goto(`${battery}/compare?from=A&to=B`);
	await expectAccessible(page, 'a comparison');
	await page.setViewportSize({ width: 390, height: 844 });
	const wider = await page.evaluate(() => document.documentElement.scrollWidth > innerWidth);
	expect(wider).toBe(false);
	await shoot(page, 'comparison-390');
});
