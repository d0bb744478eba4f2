import type { BrowserContext, Page } from '@playwright/test';
import { build, type Rolldown } from 'vite';

const entry = 'bare-editor';
const source = `
	import { defaultKeymap } from '@codemirror/commands';
	import { EditorState } from '@codemirror/state';
	import { EditorView, keymap } from '@codemirror/view';
	window.openEditor = (doc) =>
		new EditorView({
			parent: document.body,
			state: EditorState.create({ doc, extensions: [keymap.of(defaultKeymap)] }),
		});`;

/** The peer of the typing rows: the same lines in a bare editor on an empty page, without figures, colours or anybody else. */
export async function openBareEditor(context: BrowserContext, lines: string): Promise<Page> {
	const page = await context.newPage();
	await page.setContent('<!doctype html><style>.cm-editor { height: 900px }</style><body>');
	await page.addScriptTag({ content: await bundled() });
	await page.evaluate(
		(doc) => (window as unknown as { openEditor: (doc: string) => void }).openEditor(doc),
		lines,
	);
	return page;
}

async function bundled(): Promise<string> {
	const made = (await build({
		configFile: false,
		logLevel: 'silent',
		plugins: [
			{
				name: entry,
				resolveId: (id) => (id === entry ? id : undefined),
				load: (id) => (id === entry ? source : undefined),
			},
		],
		build: { write: false, rollupOptions: { input: entry, output: { format: 'iife' } } },
	})) as Rolldown.RolldownOutput;
	return made.output[0].code;
}
