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
			'.cm-tooltip': {
				zIndex: '40',
				border: '1px solid var(--rule-strong)',
				borderRadius: 'var(--radius)',
				backgroundColor: 'var(--sheet)',
				color: 'var(--ink)',
			},
			'.cm-tooltip.cm-tooltip-autocomplete > ul': {
				maxHeight: '232px',
				minWidth: 'min(260px, 80vw)',
				font: '13.5px/1.4 var(--font-figure)',
			},
			'.cm-tooltip.cm-tooltip-autocomplete > ul > li': {
				display: 'flex',
				gap: '16px',
				alignItems: 'baseline',
				justifyContent: 'space-between',
				minHeight: '28px',
				padding: '4px 10px',
				borderLeft: '2px solid transparent',
			},
			'.cm-tooltip-autocomplete ul li[aria-selected]': {
				borderLeftColor: 'var(--focus)',
				backgroundColor: 'var(--petrol-soft)',
				color: 'var(--ink)',
			},
			'.cm-completionMatchedText': { color: 'var(--petrol)', textDecoration: 'none' },
			'.cm-offered': {
				overflow: 'hidden',
				maxWidth: '220px',
				color: 'var(--ink-soft)',
				fontSize: '12.5px',
				textOverflow: 'ellipsis',
			},
			'.cm-tooltip.cm-completionInfo': { width: 'max-content', maxWidth: '340px', padding: '0' },
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
