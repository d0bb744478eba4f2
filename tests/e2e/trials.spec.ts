import { expect, test, type Page } from '@playwright/test';
import { expectAccessible } from '../support/accessible';
import { addCell, figure, newNote, openNote, signIn } from '../support/browser';
import { shoot } from '../support/screens';

const panel = (page: Page) => page.getByRole('region', { name: /^Trial/ });
const value = (page: Page, name: string) => panel(page).getByRole('textbox', { name, exact: true });
const slider = (page: Page, name: string) =>
	panel(page).getByRole('slider', { name: `${name}, slider` });
const moved = (page: Page, name: string) => panel(page).locator(`[data-moved="${name}"]`);
const tried = (page: Page, name: string) => page.locator(`.line-tried[data-tried="${name}"]`);
const line = (page: Page, text: string) => page.locator('.cm-line', { hasText: text });

async function divider(page: Page, title: string): Promise<string> {
	const path = await newNote(page, title);
	await addCell(
		page,
		'calculation',
		'R1 = tolerance(30 kohm, 1 %) # upper arm\nR2 = 10 kohm\nVin = 10 V\nVout = Vin * R2 / (R1 + R2)',
	);
	await addCell(page, 'requirement', 'Vout <= 2.6 V # at the pin');
	await expect(page.locator('[data-verdict="met"]')).toBeVisible();
	return path;
}

async function choose(page: Page, name: string) {
	await panel(page)
		.getByRole('combobox', { name: /^Change (an|another) input/ })
		.selectOption(name);
}

test('an input is tried by typing and by slider; figures, verdict and gauge move beside the present ones', async ({
	page,
	browser,
}) => {
	await signIn(page, 'engineer');
	const path = await divider(page, 'Tried');
	await addCell(page, 'curve', 'Vout over Vin from 0 V to 20 V');
	await expect(page.locator('[data-sweep="Vout"]')).toBeVisible();
	const other = await (await browser.newContext()).newPage();
	await signIn(other, 'administrator');
	await openNote(other, path);
	await expect(figure(other, 'Vout')).toContainText('2.5');

	await page.locator('.cm-line', { hasText: 'R1 =' }).click();
	await page.keyboard.press('Alt+Shift+T');
	await choose(page, 'R2');
	await expect(value(page, 'R2')).toBeFocused();
	await value(page, 'R2').fill('11');
	await expect(moved(page, 'Vout')).toContainText(/2\.68/);
	await expect(moved(page, 'Vout')).toContainText(/\+7\.3\s*%/);
	await expect(tried(page, 'Vout')).toContainText(/2\.68/);
	await expect(figure(page, 'Vout')).toContainText(/2\.50/);
	await expect(page.locator('[data-tried-verdict="not met"]')).toBeVisible();
	await expect(page.locator('[data-verdict="met"]')).toBeVisible();
	await expect(page.locator('[data-tried-mark]')).toHaveCount(1);
	await expect(page.locator('[data-tried-curve]:visible')).toHaveCount(1);
	await expect(page.locator('[data-tried-sweep]')).toContainText(/Vin = 10\sV: Vout = 2\.68/);
	await expect(panel(page).getByRole('status').first()).toHaveText(
		'1 result moves, 1 verdict turns.',
	);

	// The slider spans what the tolerance leaves open, and keeps the tolerance.
	await choose(page, 'R1');
	await expect(slider(page, 'R1')).toHaveAttribute('min', /^29\.[67]/);
	await slider(page, 'R1').focus();
	await page.keyboard.press('End');
	await expect(slider(page, 'R1')).toHaveAttribute('aria-valuetext', '30.3 kohm');
	await expect(panel(page)).toContainText('tolerance(30.3 kohm, 1 %)');
	await panel(page).getByLabel('exact').check();
	await expect(moved(page, 'R1').locator('td').nth(1)).toHaveText(/^30\.3\s*kΩ$/);
	await panel(page)
		.getByRole('button', { name: /^Widen the slider of R1/ })
		.click();
	await expect(slider(page, 'R1')).toHaveAttribute('max', /^30\.[56]/);
	await expectAccessible(page, 'a trial');
	await shoot(page, 'trial', { whole: false });

	// A formula that is wrong says so; the note and everybody else stay as they are.
	await value(page, 'R1').fill('2 V + 1 A');
	await expect(value(page, 'R1')).toHaveAccessibleDescription(/./);
	await expect(moved(page, 'Vout')).toContainText('no value');
	await panel(page).getByRole('button', { name: 'Put back R1' }).click();
	await expect(other.locator('[data-tried]')).toHaveCount(0);
	await expect(figure(other, 'Vout')).toContainText('2.50');
	await expect(line(page, 'R2 =')).toContainText('R2 = 10 kohm');

	// Who only reads the working copy tries as well.
	await other.getByRole('button', { name: 'Vin: where it is used' }).click();
	await other.getByRole('button', { name: 'Try another value' }).click();
	await value(other, 'Vin').fill('12 V');
	await expect(tried(other, 'Vout')).toContainText('3.00');
	await expect(panel(other).getByRole('button', { name: 'Write into the note' })).toHaveCount(0);

	await panel(page).getByRole('button', { name: 'Write into the note' }).click();
	await expect(line(page, 'R2 =')).toContainText('R2 = 11 kohm');
	await expect(panel(page)).toHaveCount(0);
	await expect(tried(page, 'Vout')).toHaveCount(0);
	await expect(page.locator('[data-tried-curve]')).toHaveCount(0);
	await page.keyboard.press('ControlOrMeta+z');
	await expect(line(page, 'R2 =')).toContainText('R2 = 10 kohm');
	await other.context().close();
});

test('a trial is kept for its person, and attached to a comment for everybody', async ({
	page,
	browser,
}) => {
	await signIn(page, 'engineer');
	const path = await divider(page, 'Handed on');
	const peer = await (await browser.newContext()).newPage();
	await signIn(peer, 'peer');
	await openNote(peer, path);
	await peer.getByRole('button', { name: 'Actions' }).click();
	await peer.getByRole('combobox', { name: 'What to do' }).fill('trial');
	await peer.keyboard.press('Enter');
	await choose(peer, 'R2');
	await value(peer, 'R2').fill('11 kohm');
	await choose(peer, 'Vin');
	await value(peer, 'Vin').fill('9 V');
	await expect(moved(peer, 'Vout')).toContainText('2.41');
	await panel(peer).getByPlaceholder('Keep it under a name').fill('Lower input');
	await panel(peer).getByRole('button', { name: 'Keep', exact: true }).click();
	await expect(panel(peer).getByRole('button', { name: 'Lower input', exact: true })).toBeVisible();

	await panel(peer).getByRole('button', { name: 'Comment with it' }).click();
	await peer.getByRole('textbox', { name: 'Comment' }).fill('Would this do?');
	await expect(peer.getByLabel('with my trial of R2, Vin')).toBeChecked();
	await peer.getByRole('button', { name: 'Comment', exact: true }).click();
	const attached = page.getByRole('group', { name: /^Trial of / });
	await expect(attached).toContainText('R2 10 kohm → 11 kohm');
	await expect(attached).toContainText(/Vout 2\.500\s*V.* → 2\.41/);
	await expectAccessible(page, 'a comment with a trial');
	await shoot(page, 'trial-comment');

	// The kept trial is there again after the page was closed, for this person only.
	await peer.reload();
	await expect(peer.locator('.cm-content').first()).toBeVisible();
	await peer.keyboard.press('Alt+Shift+T');
	await panel(peer).getByRole('button', { name: 'Lower input', exact: true }).click();
	await expect(value(peer, 'Vin')).toHaveValue('9 V');
	await panel(peer).getByRole('button', { name: 'Delete Lower input' }).click();
	await expect(panel(peer).getByRole('button', { name: 'Lower input', exact: true })).toHaveCount(
		0,
	);

	await attached.getByRole('button', { name: 'Open as my trial' }).click();
	await expect(value(page, 'R2')).toHaveValue('11 kohm');
	await expect(panel(page).getByText('Kept trials')).toHaveCount(0);
	await panel(page).getByRole('button', { name: 'End trial' }).click();

	// A line that was changed since keeps the whole trial out; after that is undone one action writes it.
	await line(page, 'Vin =').click();
	await page.keyboard.press('End');
	await page.keyboard.type(' + 1 V');
	await expect(figure(page, 'Vin')).toHaveText(/11\s*V/);
	await attached.getByRole('button', { name: 'Write into the note' }).click();
	await expect(page.getByText(/Nothing was written\. Vin was changed meanwhile/)).toBeVisible();
	await expect(line(page, 'R2 =')).toContainText('10 kohm');
	await line(page, 'Vin =').click();
	await page.keyboard.press('ControlOrMeta+z');
	await expect(figure(page, 'Vin')).toHaveText(/^10\s*V/);
	await attached.getByRole('button', { name: 'Write into the note' }).click();
	await expect(figure(page, 'Vout')).toContainText('2.41');
	await expect(line(page, 'Vin =')).toContainText('Vin = 9 V');
	await line(page, 'Vin =').click();
	await page.keyboard.press('ControlOrMeta+z');
	await expect(figure(page, 'Vout')).toContainText('2.50');
	await expect(line(page, 'R2 =')).toContainText('10 kohm');
	await peer.context().close();
});
