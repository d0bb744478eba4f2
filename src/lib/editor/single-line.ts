import { EditorState, type Extension } from '@codemirror/state';

/** Keeps a title on one line: pasted line breaks become spaces, Enter does nothing. */
export function singleLine(): Extension {
	return EditorState.transactionFilter.of((transaction) => {
		if (!transaction.docChanged || transaction.newDoc.lines === 1) return transaction;
		if (!transaction.isUserEvent('input')) return transaction;
		const changes: { from: number; to: number; insert: string }[] = [];
		transaction.changes.iterChanges((from, to, _fromB, _toB, inserted) => {
			changes.push({
				from,
				to,
				insert: inserted
					.toString()
					.replace(/\s*\n\s*/g, ' ')
					.trim(),
			});
		});
		return { changes };
	});
}
