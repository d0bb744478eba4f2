import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { hasProgram } from './programs';

/** Whether Poppler's programs are there; a notice says what is left out where they are not. */
export const hasPoppler = () => hasProgram('pdftotext', 'poppler-utils', 'A look into PDFs');

/** What Poppler's programs say of a PDF. */
export function lookInto(pdf: Buffer) {
	const folder = mkdtempSync(join(tmpdir(), 'halfdigit-pdf-'));
	const file = join(folder, 'paper.pdf');
	writeFileSync(file, pdf);
	const said = (program: string, ...args: string[]) => {
		const { stdout, error } = spawnSync(program, args, { encoding: 'utf8', env: { TZ: 'UTC' } });
		if (error) throw error;
		return stdout;
	};
	try {
		const attached = join(folder, 'attached');
		const list = said('pdfdetach', '-list', file);
		said('pdfdetach', '-save', '1', '-o', attached, file);
		return {
			text: said('pdftotext', '-layout', file, '-'),
			info: said('pdfinfo', '-isodates', file),
			metadata: said('pdfinfo', '-meta', file),
			structure: said('pdfinfo', '-struct', file),
			fonts: said('pdffonts', file).split('\n').slice(2).filter(Boolean),
			list,
			attached: readFileSync(attached, 'utf8'),
		};
	} finally {
		rmSync(folder, { recursive: true, force: true });
	}
}

/** What qpdf finds wrong with a file's structure; '' where nothing. */
export function complaints(pdf: Buffer): string {
	const folder = mkdtempSync(join(tmpdir(), 'halfdigit-pdf-'));
	const file = join(folder, 'paper.pdf');
	writeFileSync(file, pdf);
	const { status, stdout, stderr } = spawnSync('qpdf', ['--check', file], { encoding: 'utf8' });
	rmSync(folder, { recursive: true, force: true });
	return status === 0 ? '' : stdout + stderr;
}
