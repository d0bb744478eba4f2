import { readFileSync } from 'node:fs';
import { expect, test, type Browser, type Page } from '@playwright/test';
import { addCell, demoPassword, figure, newNote, openNote, signIn } from '../support/browser';
import { shoot } from '../support/screens';

type Account = Parameters<typeof signIn>[1];

async function arrive(browser: Browser, account: Account): Promise<Page> {
	const context = await browser.newContext({ viewport: { width: 1400, height: 900 } });
	const page = await context.newPage();
	await signIn(page, account);
	return page;
}

async function propose(page: Page, purpose: string, changes?: string) {
	await page.getByRole('button', { name: 'Propose for check' }).click();
	const dialog = page.getByRole('dialog');
	await dialog.getByLabel('What revision A is for').fill(purpose);
	if (changes !== undefined) await dialog.getByLabel(/What changed since/).fill(changes);
	await dialog.getByLabel('Cass Kettering').check();
	await dialog.getByLabel('Who is asked to approve').selectOption({ label: 'Anouk Halder' });
	await dialog.getByLabel('Wanted by').fill('2026-12-24');
	if (changes === undefined) await shoot(page, 'propose', { whole: false });
	await dialog.getByLabel('Your password').fill(demoPassword);
	await dialog.getByRole('button', { name: 'Propose for check' }).click();
	await expect(page).toHaveURL(/\/candidate$/);
}

test('a note is returned, proposed again, waived, frozen, verified, and refused when a byte is altered', async ({
	browser,
}) => {
	test.setTimeout(240_000);
	const administrator = await arrive(browser, 'administrator');
	await administrator.goto('/team/policy');
	const waive = administrator.getByLabel(/The approver may waive requirements/);
	await waive.check();
	await administrator.getByRole('button', { name: 'Set the policy' }).click();
	await expect(administrator.getByRole('status')).toHaveText('The policy is set.');
	await shoot(administrator, 'policy');

	const engineer = await arrive(browser, 'engineer');
	const note = await newNote(engineer, 'Siren capacitor, 0 to 80 V');
	const number = note.split('/').at(-1)!;
	await addCell(engineer, 'calculation', 'V_cap = 80 V # fully charged\nV_adc = V_cap / 30');
	await addCell(engineer, 'requirement', 'V_adc <= 2.5 V # the reference');
	await expect(engineer.getByRole('complementary', { name: 'Caution' })).toContainText(
		/V_cap \(80\sV\) is more than 60 V DC/,
	);
	await expect(engineer.locator('[data-saving]').first()).toHaveText(/^Saved/);
	await shoot(engineer, 'sheet-caution');
	await propose(engineer, 'Trial at two stations');

	// Returned with a reason; the second candidate says what changed.
	const peer = await arrive(browser, 'peer');
	await peer.goto(`${note}/candidate`);
	await expect(peer.getByText('Trial at two stations')).toBeVisible();
	await expect(peer.getByText('24 Dec 2026')).toBeVisible();
	await peer.getByText('Return it instead').click();
	await peer.getByRole('textbox', { name: 'Reason' }).fill('Say where the 80 V come from.');
	await peer.getByLabel('Your password').last().fill(demoPassword);
	await peer.getByRole('button', { name: 'Return with reason' }).click();
	await expect(peer.getByText(/Returned by/).first()).toBeVisible();
	await openNote(engineer, note);
	await engineer.locator('.cm-line', { hasText: 'V_adc = V_cap' }).click();
	await engineer.keyboard.press('End');
	await engineer.keyboard.press('Backspace');
	await engineer.keyboard.type('1');
	await expect(figure(engineer, 'V_adc')).toHaveText(/^2\.580/);
	await expect(engineer.locator('[data-saving]').first()).toHaveText(/^Saved/);
	await propose(engineer, 'Trial at two stations', 'The driver’s data sheet says 80 V.');
	await peer.goto(`${note}/candidate`);
	await expect(peer.getByText('The driver’s data sheet says 80 V.')).toBeVisible();
	await peer.getByRole('link', { name: /What changed since candidate 1/ }).click();
	const moved = peer.getByRole('region', { name: 'Results that moved' });
	await expect(moved).toContainText(/2\.666.*now\s*2\.580/s);
	await shoot(peer, 'compared-with-returned');
	await peer.goto(`${note}/candidate`);
	await peer.getByLabel('Your password').first().fill(demoPassword);
	await peer.getByRole('button', { name: 'Sign as checked' }).click();
	await expect(peer.getByText('Checked. Waits to be approved.')).toBeVisible();

	// The approver waives the requirement, acknowledges the caution and signs: frozen as A.
	const approver = await arrive(browser, 'approver');
	await approver.goto(`${note}/candidate`);
	const policy = approver.getByRole('list', { name: 'What the team’s policy asks' });
	await expect(policy).toContainText('is not met.');
	await approver.getByLabel(/Reason why it is waived/).fill('The input is clamped at 2.5 V.');
	await approver.getByLabel(/I acknowledge the caution/).check();
	await approver.getByLabel('Your password').first().fill(demoPassword);
	await shoot(approver, 'candidate-waiver');
	await approver.getByRole('button', { name: 'Approve and freeze' }).click();
	await expect(approver).toHaveURL(/\/revisions\/A$/);
	await expect(approver.getByRole('complementary', { name: 'Caution' })).toBeVisible();
	await expect(approver.getByText(/Waived by Anouk Halder/)).toBeVisible();
	for (const name of ['Pia Ekdahl', 'Cass Kettering', 'Anouk Halder']) {
		await expect(approver.getByRole('row', { name: new RegExp(`${name}.*UTC`) })).toBeVisible();
	}
	await approver.getByRole('link', { name: 'Compute again' }).click();
	await expect(approver.getByText(/Every figure came out the same/)).toBeVisible();
	await shoot(approver, 'computed-again');
	await approver.goBack();
	await shoot(approver, 'revision-waived');

	// A stranger verifies the file and the printed digest, and is told of one altered byte.
	const [file] = await Promise.all([
		approver.waitForEvent('download'),
		approver.getByRole('link', { name: 'Download as JSON' }).click(),
	]);
	expect(file.suggestedFilename()).toBe(`${number}-A.json`);
	const text = readFileSync(await file.path(), 'utf8');
	const digest = await approver.locator('.digest').last().innerText();
	const stranger = await (await browser.newContext()).newPage();
	await stranger.goto('/verify');
	const outcome = stranger.getByRole('status', { name: 'Outcome' });
	const drop = async (content: string | Buffer, kind: 'json' | 'pdf' = 'json') => {
		await stranger.goto('/verify');
		await stranger.getByLabel(/Drop the PDF or JSON file/).setInputFiles({
			name: `${number}-A.${kind}`,
			mimeType: `application/${kind}`,
			buffer: Buffer.from(content),
		});
	};
	await drop(text);
	await expect(outcome).toContainText('Valid and current');
	await expect(outcome).toContainText('Anouk Halder');
	await shoot(stranger, 'verify-valid');
	await drop(text.replace('fully charged', 'fully chargeb'));
	await expect(outcome).toContainText('Altered');
	await expect(outcome).toContainText('Its content is not what was sealed.');
	await shoot(stranger, 'verify-altered');

	// The same on paper: its PDF, and a PDF with one byte altered.
	const address = await approver
		.getByRole('link', { name: 'PDF', exact: true })
		.getAttribute('href');
	const pdf = await (await approver.request.get(address ?? '')).body();
	await drop(pdf, 'pdf');
	await expect(outcome).toContainText('Valid and current');
	await expect(outcome).toContainText('byte for byte, what this installation makes');
	const at = pdf.indexOf('Siren capacitor');
	expect(at).toBeGreaterThan(0);
	const forged = Buffer.from(pdf);
	forged.write('s', at);
	await drop(forged, 'pdf');
	await expect(outcome).toContainText('The pages are not proven');
	await stranger.goto('/verify');
	await stranger.getByLabel(/Or type its digest/).fill(digest);
	await stranger.getByRole('button', { name: 'Verify' }).click();
	await expect(outcome).toContainText(`${number}, revision A`);
	await expect(outcome).not.toContainText('Siren capacitor');

	// Withdrawn, it says so wherever it is shown.
	await approver.getByText('Withdraw this revision').click();
	await approver.getByRole('textbox', { name: 'Reason' }).fill('The siren was replaced.');
	await approver.getByLabel('Your password').fill(demoPassword);
	await approver.getByRole('button', { name: 'Withdraw with reason' }).click();
	await expect(approver.getByText('Withdrawn.', { exact: true })).toBeVisible();
	await expect(approver.getByText('The siren was replaced.')).toBeVisible();
	await shoot(approver, 'revision-withdrawn');
	await drop(text);
	await expect(outcome).toContainText('Genuine, but withdrawn');
	await approver.goto('/notes');
	await expect(approver.getByRole('row', { name: new RegExp(number) })).toContainText('Withdrawn');
	await openNote(engineer, note);
	await expect(engineer.getByRole('contentinfo')).toContainText('A withdrawn');

	// Everything of it stands in the audit trail.
	await administrator.goto('/team/audit');
	for (const action of ['revision withdrawn', 'revision frozen', 'candidate returned']) {
		await expect(administrator.getByRole('cell', { name: action }).first()).toBeVisible();
	}
	await shoot(administrator, 'audit', { whole: false });
	await administrator.goto('/team/policy');
	await waive.uncheck();
	await administrator.getByRole('button', { name: 'Set the policy' }).click();
	await expect(administrator.getByRole('status')).toBeVisible();
});
