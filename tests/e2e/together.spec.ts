import { expect, test, type Browser, type BrowserContext, type Page } from '@playwright/test';
import { addCell, figure, newNote, signIn } from '../support/browser';
import { shoot } from '../support/screens';

const saving = (page: Page) => page.locator('[data-saving]');
const terminal = (page: Page, number: number) =>
	page.getByRole('button', { name: new RegExp(`^Cell ${number}(,|$)`) });
const lineOf = (page: Page, text: string) => page.locator('.cm-line', { hasText: text });

/** Somebody else at another computer. */
async function another(
	browser: Browser,
	account: 'peer' | 'approver' = 'peer',
): Promise<{ context: BrowserContext; page: Page }> {
	const context = await browser.newContext();
	const page = await context.newPage();
	await signIn(page, account);
	return { context, page };
}

/** What is written in a line, without readouts and the cursors of others. */
const written = (page: Page, text: string) =>
	lineOf(page, text).evaluate((line) => {
		const copy = line.cloneNode(true) as HTMLElement;
		copy
			.querySelectorAll('[contenteditable=false], .cm-ySelectionCaret')
			.forEach((it) => it.remove());
		return copy.textContent.trim();
	});

async function open(page: Page, path: string): Promise<void> {
	await page.goto(path);
	await expect(page.locator('[data-connection=online]')).toBeVisible();
	await expect(saving(page)).toHaveText(/^Saved/);
}

/** Cuts a page's socket to its note, and lets it come back. The rest of the network stays. */
async function socketSwitch(page: Page): Promise<{ cut: () => void; mend: () => void }> {
	let isCut = false;
	const open = new Set<() => void>();
	await page.routeWebSocket(/\/sync\//, (socket) => {
		const close = () => void socket.close({ code: 1013 });
		if (isCut) return close();
		socket.connectToServer();
		open.add(close);
	});
	return {
		cut: () => {
			isCut = true;
			for (const close of open) close();
			open.clear();
		},
		mend: () => (isCut = false),
	};
}

async function typeAtEnd(page: Page, line: string, typed: string): Promise<void> {
	await lineOf(page, line).click();
	await page.keyboard.press('End');
	await page.keyboard.type(typed);
	// What is offered while typing would lie over the line.
	await page.keyboard.press('Escape');
}

test('two people change one line at the same time, one of them offline for a while: both end with the same text and figures', async ({
	page,
	browser,
}) => {
	await signIn(page, 'engineer');
	const path = await newNote(page, 'One line');
	await addCell(page, 'calculation', 'V_a = 1 V');
	await expect(figure(page, 'V_a')).toHaveText(/1\s*V/);
	const other = await another(browser);
	await open(other.page, path);
	await expect(figure(other.page, 'V_a')).toHaveText(/1\s*V/);

	// Both at once, with a connection.
	await Promise.all([typeAtEnd(page, 'V_a', ' + 10 V'), typeAtEnd(other.page, 'V_a', ' + 200 V')]);
	for (const each of [page, other.page]) {
		await expect(figure(each, 'V_a')).toHaveText(/^211\s*V/);
		await expect(saving(each)).toHaveText(/^Saved/);
	}
	expect(await written(other.page, 'V_a')).toBe(await written(page, 'V_a'));

	// And once more, one of them without one.
	await other.context.setOffline(true);
	await expect(other.page.getByRole('alert')).toContainText('Connection lost');
	await Promise.all([
		typeAtEnd(page, 'V_a', ' + 3000 V'),
		typeAtEnd(other.page, 'V_a', ' + 40000 V'),
	]);
	await expect(saving(other.page)).toHaveText('Offline: 10 changes kept on this computer');
	await expect(figure(page, 'V_a')).toHaveText(/^3211\s*V|^3\.211\s*kV/);
	await shoot(other.page, 'together-offline', { whole: false });
	await other.context.setOffline(false);
	for (const each of [page, other.page]) {
		await expect(saving(each)).toHaveText(/^Saved/, { timeout: 30_000 });
		await expect(lineOf(each, 'V_a')).toHaveText(/3000 V/);
		await expect(lineOf(each, 'V_a')).toHaveText(/40000 V/);
	}
	await expect.poll(() => written(other.page, 'V_a')).toBe(await written(page, 'V_a'));
	await expect(figure(page, 'V_a')).toHaveText(/^43211\s*V|^43\.211\s*kV/);
	await expect(figure(other.page, 'V_a')).toHaveText(await figure(page, 'V_a').innerText());
	await other.context.close();
});

test('what was typed offline survives the closed tab and is saved when the note is opened again', async ({
	page,
	context,
}) => {
	await signIn(page, 'engineer');
	const path = await newNote(page, 'Closed tab');
	await addCell(page, 'calculation', 'V_a = 1 V');
	await expect(saving(page)).toHaveText(/^Saved/);
	await context.setOffline(true);
	await typeAtEnd(page, 'V_a', ' * 7');
	await expect(saving(page)).toHaveText('Offline: 4 changes kept on this computer');
	await page.close({ runBeforeUnload: false });
	await context.setOffline(false);

	const back = await context.newPage();
	await open(back, path);
	await expect(figure(back, 'V_a')).toHaveText(/^7\s*V/);
	await expect(lineOf(back, 'V_a')).toContainText('1 V * 7');
	await back.reload();
	await expect(figure(back, 'V_a')).toHaveText(/^7\s*V/);
	await expect(back.getByRole('region', { name: 'Changes that are not in the note' })).toHaveCount(
		0,
	);
});

test('leaving with unsaved changes asks first, and signing out says what it would delete', async ({
	page,
}) => {
	await signIn(page, 'engineer');
	const path = await newNote(page, 'Leaving');
	await addCell(page, 'calculation', 'V_a = 1 V');
	await expect(saving(page)).toHaveText(/^Saved/);
	// What is saved in a moment is no reason to ask.
	await typeAtEnd(page, 'V_a', ' * 2');
	await page.getByRole('link', { name: 'Notes', exact: true }).click();
	await expect(page.getByRole('heading', { name: 'Notes', level: 1 })).toBeVisible();

	const socket = await socketSwitch(page);
	await open(page, path);
	await expect(lineOf(page, 'V_a')).toContainText('* 2');
	socket.cut();
	await expect(page.getByRole('alert')).toContainText('Connection lost');
	await typeAtEnd(page, 'V_a', ' * 3');
	await expect(saving(page)).toHaveText('Offline: 4 changes kept on this computer');
	const question = page.getByRole('dialog', { name: 'Leave before everything is saved?' });
	await page.getByRole('link', { name: 'Notes', exact: true }).click();
	await expect(question).toContainText('4 changes are kept on this computer');
	await shoot(page, 'together-leaving', { whole: false });
	await question.getByRole('button', { name: 'Stay' }).click();
	await expect(lineOf(page, 'V_a')).toContainText('* 3');
	let asked = false;
	page.once('dialog', (dialog) => {
		asked = dialog.type() === 'beforeunload';
		void dialog.dismiss();
	});
	await page.close({ runBeforeUnload: true });
	await expect.poll(() => asked).toBe(true);
	await page.getByRole('link', { name: 'Notes', exact: true }).click();
	await question.getByRole('button', { name: 'Leave' }).click();
	await expect(page.getByRole('heading', { name: 'Notes', level: 1 })).toBeVisible();

	await page.getByRole('button', { name: /: menu$/ }).click();
	await page.getByRole('button', { name: 'Sign out' }).click();
	const wipe = page.getByRole('dialog', { name: 'Sign out and delete unsaved changes?' });
	await expect(wipe).toContainText(`${path.split('/').at(-1)}: 4 changes`);
	await wipe.getByRole('button', { name: 'Stay signed in' }).click();
	await page.getByRole('button', { name: /: menu$/ }).click();
	await page.getByRole('button', { name: 'Sign out' }).click();
	await wipe.getByRole('button', { name: 'Sign out and delete' }).click();
	await expect(page.getByLabel('E-mail')).toBeVisible();
	const left = await page.evaluate(async () =>
		(await indexedDB.databases()).map(({ name }) => name),
	);
	expect(left).toEqual([]);
	socket.mend();
	await signIn(page, 'engineer');
	await open(page, path);
	await expect(lineOf(page, 'V_a')).not.toContainText('* 3');
});

test('what cannot be stored is offered as text with its reason, until it is discarded', async ({
	page,
}) => {
	await signIn(page, 'engineer');
	await newNote(page, 'Too much');
	await addCell(page, 'text', 'Readings follow.');
	await expect(saving(page)).toHaveText(/^Saved/);
	await page.locator('[data-kind=text]').last().getByText('Readings follow.').click();
	await page.keyboard.press('End');
	await page.keyboard.insertText(' 0123456789'.repeat(120_000));
	await expect(saving(page)).toHaveText(/^Refused: /);
	await expect(page.getByRole('alert')).toBeVisible();
	const panel = page.getByRole('region', { name: 'Changes that are not in the note' });
	await expect(panel).toContainText('Kept on this computer');
	await expect(panel.locator('pre')).toContainText('Readings follow. 0123456789');
	await expect(page.locator('[contenteditable=true]')).toHaveCount(0);
	await shoot(page, 'together-refused', { whole: false });
	await page.getByRole('button', { name: 'Reload the note' }).click();
	await expect(saving(page)).toHaveText(/^Saved/);
	await expect(page.locator('.prose', { hasText: 'Readings follow.' })).toHaveText(
		'Readings follow.',
	);
	await expect(panel.locator('pre')).toContainText('Readings follow. 0123456789');
	await page.context().grantPermissions(['clipboard-read', 'clipboard-write']);
	await panel.getByRole('button', { name: 'Copy the text' }).click();
	await expect(page.getByText('The text is copied.')).toBeVisible();
	expect(await page.evaluate(() => navigator.clipboard.readText())).toContain('0123456789 0123');
	await panel.getByRole('button', { name: 'Discard' }).click();
	await expect(panel).toHaveCount(0);
	await page.reload();
	await expect(saving(page)).toHaveText(/^Saved/);
	await expect(panel).toHaveCount(0);
});

test('a page shows who is here, in which cell, and follows them until its reader moves', async ({
	page,
	browser,
}) => {
	await signIn(page, 'engineer');
	await page.getByRole('link', { name: 'Station battery voltage channel' }).click();
	await expect(page).toHaveURL(/\/notes\/[A-Z]+-\d+$/);
	const path = new URL(page.url()).pathname;
	const other = await another(browser);
	await open(other.page, path);
	await page.setViewportSize({ width: 1400, height: 500 });
	const here = page.getByRole('button', { name: '1 other here' });
	await expect(here).toBeVisible();

	const cells = await other.page
		.locator('[data-kind=calculation], [data-kind=requirement]')
		.evaluateAll((all) => all.map((one) => (one as HTMLElement).dataset.cell!));
	const place = async (cellId: string) => {
		const there = other.page.locator(`[data-cell="${cellId}"]`);
		await there.scrollIntoViewIfNeeded();
		await there.locator('.cm-line').first().click();
	};
	const [first, last] = [cells[0]!, cells.at(-1)!];
	await place(last);
	const target = page.locator(`[data-cell="${last}"]`);
	await expect(target.locator('[data-here]')).toContainText('here.');

	// By keyboard alone.
	await page.evaluate(() => window.scrollTo(0, 0));
	await here.focus();
	await page.keyboard.press('Enter');
	const follow = page.getByRole('button', { name: /^Follow / });
	await expect(follow).toBeVisible();
	await shoot(page, 'together-people', { whole: false });
	await follow.focus();
	await page.keyboard.press('Enter');
	await expect(
		page.getByRole('status').filter({ hasText: /^Following .+, at cell \d+/ }),
	).toHaveCount(1);
	await expect(target).toBeInViewport();
	await expect(target.locator('.cm-ySelectionInfo')).not.toHaveText('');
	await shoot(page, 'together-following', { whole: false });
	await page.setViewportSize({ width: 1400, height: 500 });
	await place(first);
	await expect(page.locator(`[data-cell="${first}"]`)).toBeInViewport();
	await page.keyboard.press('Escape');
	await expect(page.getByText(/^No longer following /)).toHaveCount(1);
	const stays = await page.evaluate(() => window.scrollY);
	await place(last);
	await expect(target.locator('[data-here]')).toHaveCount(1);
	expect(await page.evaluate(() => window.scrollY)).toBe(stays);

	await here.click();
	await follow.click();
	await expect(page.getByRole('button', { name: 'Stop' })).toBeVisible();
	await page.mouse.move(700, 250);
	await page.mouse.wheel(0, -200);
	await expect(page.getByRole('button', { name: 'Stop' })).toHaveCount(0);
	await other.context.close();
	await expect(here).toHaveCount(0);
});

test('each cell says who changed it last, with the pointer, the keyboard and in its menu', async ({
	page,
	browser,
}) => {
	await signIn(page, 'engineer');
	const path = await newNote(page, 'Authors');
	await addCell(page, 'calculation', 'V_a = 1 V');
	await expect(saving(page)).toHaveText(/^Saved/);
	await terminal(page, 2).hover();
	const told = page.getByRole('tooltip');
	await expect(told).toContainText('Last changed by');
	const own = await told.innerText();
	const other = await another(browser);
	await open(other.page, path);
	await typeAtEnd(other.page, 'V_a', ' * 2');
	await expect(saving(other.page)).toHaveText(/^Saved/);
	await page.mouse.move(0, 0);
	await terminal(page, 2).focus();
	await page.keyboard.press('Shift+Tab');
	await page.keyboard.press('Tab');
	await expect(told).toContainText('Last changed by');
	await expect(told).not.toHaveText(own);
	await terminal(page, 2).click();
	await expect(page.getByRole('menu')).toContainText('Last changed by');
	await shoot(page, 'together-author', { whole: false });
	await other.context.close();
});

test('comments appear by themselves on the sheet and on the page of the candidate', async ({
	page,
	browser,
}) => {
	await signIn(page, 'approver');
	await page.getByRole('link', { name: /level transmitter/i }).click();
	await expect(page).toHaveURL(/\/notes\/[A-Z]+-\d+$/);
	const path = new URL(page.url()).pathname;
	const other = await another(browser);
	await open(other.page, path);
	await page.goto(`${path}/candidate`);
	await expect(page.getByRole('heading', { level: 1 })).toBeVisible();
	const sheet = await page.context().newPage();
	await open(sheet, path);
	const words = 'Does the loop still hold at 18 V?';
	await terminal(other.page, 1).click();
	await other.page.getByRole('menuitem', { name: 'Comment' }).click();
	await other.page.getByRole('textbox', { name: 'Comment' }).fill(words);
	await other.page.getByRole('button', { name: 'Comment', exact: true }).click();
	await expect(sheet.locator('[data-thread]', { hasText: words })).toBeVisible();
	await expect(page.getByText(words)).toBeVisible();
	await other.context.close();
});

test('a key is painted before it is sent, and what waits is sent at once when the page goes out of sight', async ({
	page,
}) => {
	await page.addInitScript(() => {
		const order: string[] = [];
		Object.assign(window, { order });
		WebSocket.prototype.send = new Proxy(Reflect.get(WebSocket.prototype, 'send'), {
			apply(send, socket: WebSocket, message: [string]) {
				if (socket.url.includes('/sync/')) order.push('sent');
				Reflect.apply(send, socket, message);
			},
		});
		addEventListener(
			'keydown',
			() => {
				order.push('key');
				requestAnimationFrame(() => order.push('frame'));
			},
			true,
		);
	});
	await signIn(page, 'engineer');
	await newNote(page, 'Painted first');
	await addCell(page, 'calculation', 'a = 1');
	await expect(saving(page)).toHaveText(/^Saved/);
	await lineOf(page, 'a =').click();
	await page.keyboard.press('End');

	await page.evaluate(() => ((window as unknown as { order: string[] }).order.length = 0));
	await page.keyboard.press('2');
	await expect(figure(page, 'a')).toHaveText('12');
	const order = await page.evaluate(() => (window as unknown as { order: string[] }).order);
	expect(order.slice(0, 3)).toEqual(['key', 'frame', 'sent']);

	const sentAtOnce = await page.evaluate(async () => {
		const { order } = window as unknown as { order: string[] };
		order.length = 0;
		document.execCommand('insertText', false, '3');
		// The editor reads what was written into it in a microtask.
		await Promise.resolve();
		const before = order.length;
		dispatchEvent(new PageTransitionEvent('pagehide'));
		return [before, order.length > 0];
	});
	expect(sentAtOnce).toEqual([0, true]);
	await expect(figure(page, 'a')).toHaveText('123');
});
