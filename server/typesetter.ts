import { NodeCompiler } from '@myriaddreamin/typst-ts-node-compiler';
import { useFonts } from '$lib/server/paper/glyphs';
import type { PressAnswer, PressTask } from '$lib/server/paper/press';
import { qrSvg } from '$lib/server/paper/qr';
import type { SealedContent } from '$lib/server/paper/sealed-content';
import { sheetOf } from '$lib/server/paper/sheet';
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import formula from './typesetting/formula.typ';
import lines from './typesetting/lines.typ';
import look from './typesetting/look.typ';
import main from './typesetting/main.typ';
import plots from './typesetting/plots.typ';
import prose from './typesetting/prose.typ';
import record from './typesetting/record.typ';

/** Nothing lies in this folder: the compiler sees the files that are given to it, and no others. */
const folder = '/paper';
const program = { formula, lines, look, main, plots, prose, record };

/** PDF/A-3 with tags: an archive's file that may carry another one. */
const standard = 'a-3a';

const compiler = createCompiler();

/** A child that typesets revisions for another process until that goes away. It has no environment. */
function start(): void {
	if (!process.send) throw new Error('The typesetter runs as a child of another process only.');
	process.on('message', (task) => answer(typeset(task as PressTask)));
	process.on('disconnect', () => process.exit(0));
	// Signals to the group are the parent's to handle; it says goodbye by disconnecting.
	process.on('SIGINT', () => undefined);
	process.on('SIGTERM', () => undefined);
	answer({ kind: 'ready' });
}

function answer(message: PressAnswer): void {
	process.send?.(message);
}

function typeset({ id, file, paper, origin }: PressTask): PressAnswer {
	try {
		const sheet = sheetOf(JSON.parse(file) as SealedContent, { paper, origin });
		give('sheet.json', JSON.stringify(sheet));
		give('revision.json', file);
		give('qr.svg', qrSvg(sheet.address));
		return { kind: 'done', id, pdf: pdfOf() };
	} catch (error) {
		return { kind: 'failed', id, why: error instanceof Error ? error.message : String(error) };
	} finally {
		// What was set before must not be held in memory for long, and changes no byte of what is set next.
		compiler.evictCache(2);
	}
}

function pdfOf(): Buffer {
	const compiled = compiler.compile({ mainFilePath: `${folder}/main.typ` });
	if (!compiled.result) {
		const fault = compiled.takeError();
		throw new Error(JSON.stringify(fault?.shortDiagnostics ?? 'no document').slice(0, 2000));
	}
	return compiler.pdf(compiled.result, { pdfStandard: standard });
}

function createCompiler(): NodeCompiler {
	const fonts = [
		'fira-sans/400Regular/FiraSans_400Regular.ttf',
		'fira-mono/400Regular/FiraMono_400Regular.ttf',
		'fira-sans/600SemiBold/FiraSans_600SemiBold.ttf',
		'fira-sans/400Regular_Italic/FiraSans_400Regular_Italic.ttf',
		'fira-sans/600SemiBold_Italic/FiraSans_600SemiBold_Italic.ttf',
		'fira-sans-condensed/600SemiBold/FiraSansCondensed_600SemiBold.ttf',
	].map((name) => readFileSync(fileURLToPath(import.meta.resolve(`@expo-google-fonts/${name}`))));
	// The first two are those that others fall back on.
	useFonts(fonts.slice(0, 2));
	const made = NodeCompiler.create({ workspace: folder, fontArgs: [{ fontBlobs: fonts }] });
	for (const [name, source] of Object.entries(program))
		made.mapShadow(`${folder}/${name}.typ`, Buffer.from(source));
	return made;
}

function give(name: string, content: string): void {
	compiler.mapShadow(`${folder}/${name}`, Buffer.from(content, 'utf8'));
}

start();
