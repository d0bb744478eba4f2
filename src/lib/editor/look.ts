import type { Extension } from '@codemirror/state';
import { EditorView } from '@codemirror/view';

/** An editor without a box of its own: it stands in the sheet as the static lines do. */
export function look(): Extension {
	return [
		EditorView.lineWrapping,
		EditorView.theme({
			'&': { color: 'inherit' },
			'&.cm-focused': { outline: 'none' },
			'.cm-scroller': { fontFamily: 'inherit', lineHeight: 'inherit', overflow: 'visible' },
			// What is wider than the sheet scrolls inside itself.
			'.cm-content': { padding: '0', minWidth: '0', caretColor: 'var(--ink)' },
			'.cm-line': { padding: '0' },
			'&.cm-focused .cm-matchingBracket': {
				backgroundColor: 'var(--petrol-soft)',
				color: 'inherit',
			},
			'&.cm-focused .cm-nonmatchingBracket': { backgroundColor: 'var(--fail-soft)' },
			'.cm-placeholder': { color: 'var(--ink-faint)' },
			'.cm-ySelectionCaret': { borderWidth: '0 0 0 2px', margin: '0 -1px', position: 'relative' },
			'.cm-ySelectionCaretDot': { display: 'none' },
			'.cm-ySelectionInfo': {
				top: '-16px',
				left: '-2px',
				padding: '0 5px',
				borderRadius: '2px',
				font: '600 11px/16px var(--font-label)',
				opacity: '1',
				pointerEvents: 'none',
			},
		}),
	];
}
