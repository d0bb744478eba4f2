import { expect, test, type Page } from '@playwright/test';
import { addCell, figure, newNote, signIn } from '../support/browser';

const lines = [
	'V_in = normal(10 V, 20 mV) # from the bench supply',
	'R_1 = tolerance(30 kohm, 1 %) # upper arm',
	'R_2 = tolerance(10 kohm, 1 %) # lower arm',
	'V_out = V_in * R_2 / (R_1 + R_2) # at the converter',
	'n_out = code(V_out, 3.3 V, 12)',
].join('\n');

const opener = (page: Page, name: string) =>
	page.getByRole('button', { name: `${name}: formula and doubt` });
const detail = (page: Page) => page.locator('[data-detail]');

/** A note of a divider in doubt; gives the complaints of the browser's console as they come. */
async function divider(page: Page, title: string): Promise<string[]> {
	const complaints: string[] = [];
	page.on('console', (message) => {
		if (message.type() === 'error') complaints.push(message.text());
	});
	page.on('pageerror', (error) => complaints.push(error.message));
	await signIn(page, 'engineer');
	await newNote(page, title);
	await addCell(page, 'calculation', lines);
	await expect(figure(page, 'V_out')).toHaveText(/^2\.500\s*±\s*0\.032\s*V$/);
	await expect(page.locator('[data-saving]')).toHaveText(/^Saved \d\d:\d\d$/);
	return complaints;
}

/** Buttons, links and fields that a screen reader would have no name for. */
async function nameless(page: Page, part: string): Promise<string[]> {
	const tree = await page.locator(part).ariaSnapshot();
	return tree
		.split('\n')
		.filter((line) =>
			/^\s*- (button|link|checkbox|textbox|combobox|table|region|img|group|progressbar)(?! ")/.test(
				line,
			),
		);
}

test('a line opens with the keyboard and shows formula, doubt and budget', async ({ page }) => {
	const complaints = await divider(page, 'Behind a line');
	await opener(page, 'V_out').focus();
	await page.keyboard.press('Enter');
	await expect(opener(page, 'V_out')).toHaveAttribute('aria-expanded', 'true');
	await expect(detail(page)).toHaveAttribute('data-detail', 'V_out');
	await expect(
		detail(page).getByRole('heading', { name: /V_out.*at the converter/ }),
	).toBeVisible();

	const formula = detail(page).getByRole('group', { name: 'Formula' });
	await expect(formula.locator('math')).toHaveCount(2);
	await expect(formula.locator('math').first()).toContainText('out');
	await expect(formula.locator('math').last()).toContainText('30.00');
	// Style sheet and fonts of the formulas are there.
	await expect(formula.locator('.frac-line').first()).toHaveCSS('border-bottom-style', 'solid');
	const hasFont = () => page.evaluate(() => document.fonts.check('16px KaTeX_Main'));
	await expect.poll(hasFont).toBe(true);

	await expect(detail(page)).toContainText('k = 1.96 for 95 %');
	await expect(detail(page)).toContainText(/Degrees of freedom\s*∞/);
	await expect(detail(page)).toContainText(/Worst case\s*2\.4[\d\s]+V to 2\.5[\d\s]+V\s*proved/);
	const budget = detail(page).getByRole('table', { name: 'What its doubt is made of' });
	await expect(budget.getByRole('columnheader').first()).toHaveText('Input');
	await expect(budget.getByRole('rowheader').first()).toHaveText(/R\s*[12]/);
	await expect(budget).toContainText('rectangular');
	await expect(budget).toContainText('normal');
	await expect(budget).toContainText(/µV\/Ω/);
	const shares = await budget.locator('.share').allInnerTexts();
	const sum = shares.reduce((total, share) => total + parseFloat(share), 0);
	expect(shares).toHaveLength(3);
	expect(sum).toBeGreaterThan(99);
	expect(sum).toBeLessThan(101);
	expect(await nameless(page, '[data-detail]')).toEqual([]);

	await page.keyboard.press('Escape');
	await expect(detail(page)).toHaveCount(0);
	await expect(opener(page, 'V_out')).toBeFocused();
	await expect(opener(page, 'V_out')).toHaveAttribute('aria-expanded', 'false');
	expect(complaints).toEqual([]);
});

test('one line is open at a time, and a name leads to its line', async ({ page }) => {
	await divider(page, 'One at a time');
	await opener(page, 'R_1').click();
	await expect(detail(page)).toHaveAttribute('data-detail', 'R_1');
	await opener(page, 'V_out').click();
	await expect(detail(page)).toHaveCount(1);
	await expect(detail(page)).toHaveAttribute('data-detail', 'V_out');
	await detail(page)
		.getByRole('link', { name: /^V_in, 10\.000/ })
		.first()
		.click();
	await expect(opener(page, 'V_in')).toBeFocused();
	await opener(page, 'V_out').click();
	await expect(detail(page)).toHaveCount(0);
});

test('what is open follows each edit and stays in its place', async ({ page }) => {
	await divider(page, 'Following');
	await opener(page, 'V_out').click();
	const math = detail(page).locator('math').last();
	await expect(math).toContainText('30.00');
	await detail(page).evaluate((element) => element.setAttribute('data-before', 'yes'));
	await page.locator('.cm-line', { hasText: 'R_1 =' }).click();
	await page.keyboard.press('End');
	for (let i = 0; i < '30 kohm, 1 %) # upper arm'.length; i++)
		await page.keyboard.press('Backspace');
	await page.keyboard.type('40 kohm, 1 %)');
	await expect(figure(page, 'V_out')).toHaveText(/^2\.000\s*±/);
	await expect(math).toContainText('40.00');
	await expect(detail(page).locator('.readout').first()).toHaveText(/^2\.000\s*±/);
	await expect(detail(page)).toHaveAttribute('data-before', 'yes');
});

test('trials are drawn on demand, with their seed and what they say of first order', async ({
	page,
}) => {
	await divider(page, 'Trials');
	await opener(page, 'V_out').click();
	await detail(page).getByRole('button', { name: 'Draw trials' }).click();
	await expect(detail(page).getByText(/^(Not v|V)alidated: /)).toBeVisible({ timeout: 30_000 });
	await expect(detail(page)).toContainText(/1\s000\s000 trials, seed \d+/);
	await expect(detail(page)).toContainText(
		/Symmetric 95 % interval\s*2\.4[\d\s]+V to 2\.5[\d\s]+V/,
	);
	await expect(detail(page).getByRole('img', { name: /^Histogram of the trials/ })).toBeVisible();
	const seed = /seed (\d+)/.exec(await detail(page).innerText())?.[1];

	await detail(page).getByLabel('until the results are stable').check();
	await detail(page).getByRole('button', { name: 'Draw again' }).click();
	await expect(detail(page)).toContainText(`seed ${seed}; stable`, { timeout: 30_000 });
	expect(await nameless(page, '[data-detail]')).toEqual([]);

	// Other figures have other trials.
	await page.locator('.cm-line', { hasText: 'n_out =' }).click();
	await page.keyboard.press('ArrowUp');
	await page.keyboard.press('End');
	await expect(detail(page).getByRole('button', { name: 'Draw again' })).toBeVisible();
	await page.locator('.cm-line', { hasText: 'R_2 =' }).click();
	await page.keyboard.press('Home');
	for (let i = 0; i < 'R_2 = tolerance('.length; i++) await page.keyboard.press('ArrowRight');
	await page.keyboard.type('9');
	await expect(detail(page).getByRole('button', { name: 'Draw trials' })).toBeVisible();
});

test('trials under way show how far they are and can be stopped', async ({ page }) => {
	await divider(page, 'Stopping');
	let asked = (): void => undefined;
	const asking = new Promise<void>((resolve) => (asked = resolve));
	await page.route('**/trials', () => asked());
	await opener(page, 'V_out').click();
	await detail(page).getByRole('button', { name: 'Draw trials' }).click();
	await asking;
	await expect(detail(page).getByRole('progressbar', { name: 'Trials drawn' })).toBeVisible();
	const ended = page.waitForEvent('requestfailed', (request) => request.url().endsWith('/trials'));
	await detail(page).getByRole('button', { name: 'Stop' }).click();
	await ended;
	await expect(detail(page).getByRole('button', { name: 'Draw trials' })).toBeVisible();
	await expect(detail(page).getByRole('alert')).toHaveCount(0);
	await page.unroute('**/trials');
	await detail(page).getByRole('button', { name: 'Draw trials' }).click();
	await expect(detail(page).getByText(/alidated: /)).toBeVisible({ timeout: 30_000 });
});

test('a value of which more must be known says so on its line and in its detail', async ({
	page,
}) => {
	await divider(page, 'Remarks');
	const sentence = /step lies in the way/;
	await expect(opener(page, 'n_out')).toHaveAccessibleDescription(sentence);
	await expect(opener(page, 'V_out')).toHaveAccessibleDescription('');
	const tip = page.getByRole('tooltip').filter({ hasText: sentence });
	await expect(tip).toBeHidden();
	await opener(page, 'n_out').hover();
	await expect(tip).toBeVisible();
	await opener(page, 'n_out').click();
	await expect(detail(page).locator('.remark')).toHaveText(sentence);
});

test('a requirement whose limit lies inside the doubt is undecided, with its chance', async ({
	page,
}) => {
	await divider(page, 'Undecided');
	await addCell(page, 'requirement', 'V_out <= 2.52 V\nV_out <= 2.9 V');
	const [open, kept] = [
		page.locator('[data-verdict]').nth(0),
		page.locator('[data-verdict]').nth(1),
	];
	await expect(open).toHaveAttribute('data-verdict', 'undecided');
	await expect(open).toContainText(/^Undecided/);
	await expect(open).toContainText(/\b8\d\s% likely kept/);
	await expect(kept).toHaveAttribute('data-verdict', 'met');
	await expect(kept).not.toContainText('likely');
	const gauge = page.getByRole('img', { name: /guard band before it: undecided$/ });
	await expect(gauge.locator('.guard')).toHaveCount(1);
	await expect(gauge.locator('.doubt')).toHaveCount(1);
	await expect(page.getByRole('contentinfo')).toContainText('1 undecided');
});

for (const width of [1024, 390]) {
	test(`at ${width} px an open line scrolls inside itself`, async ({ page }) => {
		await page.setViewportSize({ width, height: 844 });
		await divider(page, `Narrow ${width}`);
		await opener(page, 'V_out').click();
		await expect(detail(page).getByRole('table')).toBeVisible();
		const overflow = await page.evaluate(
			() => document.documentElement.scrollWidth - document.documentElement.clientWidth,
		);
		expect(overflow).toBe(0);
		const { width: readout } = (await figure(page, 'V_out').boundingBox())!;
		const text = await figure(page, 'V_out').evaluate((element) => element.scrollWidth);
		expect(text).toBeLessThanOrEqual(Math.ceil(readout));
	});
}

test('a frozen revision shows values with their uncertainty and remarks, and nothing to open', async ({
	page,
}) => {
	await signIn(page, 'reader');
	await page.getByRole('link', { name: 'Station battery voltage channel' }).click();
	await expect(figure(page, 'V_adc')).toHaveText(/^2\.4112\s*±\s*0\.0036\s*V$/);
	await expect(page.getByRole('button', { name: /formula and doubt/ })).toHaveCount(0);
	const mark = page.getByRole('button', { name: 'What must be known of this value' }).first();
	await mark.click();
	await expect(page.locator('[popover]:popover-open')).toContainText('step lies in the way');
	await page.keyboard.press('Escape');
	await expect(page.locator('.line-remark:popover-open')).toHaveCount(0);
	await page.emulateMedia({ media: 'print' });
	await expect(mark).toBeHidden();
	await expect(page.getByText(/^n_top: A step lies in the way/)).toBeVisible();
});
