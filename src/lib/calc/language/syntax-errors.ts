import { Trouble } from '../trouble';
import { asTyped } from './characters';
import { unclosed, type Token } from './tokens';

/** A parse error of mathjs in our words, at the token it is about. */
export function syntaxTrouble(error: unknown, line: string, tokens: Token[]): Trouble {
	if (error instanceof RangeError)
		return new Trouble('tooDeep', whole(line), 'Nested too deeply.', {
			mend: 'Split the line into several quantities.',
		});
	const char = (error as { char?: number }).char;
	const message = error instanceof Error ? error.message : '';
	const column = (char ?? line.length + 1) - 1;
	const found = tokens.find((token) => token.to > column);
	const last = tokens.at(-1) ?? { ...whole(line), text: '' };
	const place = found ?? { from: last.from, to: last.to };

	if (message.startsWith('Column dimensions'))
		return new Trouble('syntax', whole(line), 'The rows of this matrix differ in length.');
	if (message.startsWith('False part'))
		return new Trouble('syntax', place, 'A choice needs both cases: `condition ? this : that`.');
	const open = unclosed(tokens);
	if (
		open &&
		(message.includes('expected') || message.includes('Unexpected end')) &&
		(!found || /^Parenthesis|^End of matrix/.test(message))
	) {
		const { from, to } = open.token;
		if (!found || found.text !== ',')
			return new Trouble('syntax', { from, to }, `This \`${open.token.text}\` is not closed.`, {
				mend: `Add \`${open.closing}\`.`,
				replacement: open.closing,
				replaces: { from: last.to, to: last.to },
			});
	}
	if (!found || message.startsWith('Unexpected end'))
		return new Trouble(
			'syntax',
			{ from: last.from, to: last.to },
			`The line ends after \`${asTyped(last.text)}\`, where a value is expected.`,
			{ mend: 'Complete the formula.' },
		);
	if (message.startsWith('Invalid left hand side') || found.text === '=')
		return new Trouble(
			'syntax',
			before(tokens),
			'Only a name, or a function with its parameters, stands before `=`.',
			{
				mend: 'Write `name = formula`; write `==` to compare.',
			},
		);
	if (found.text === ',')
		return new Trouble('syntax', place, '`,` separates the values of a function.', {
			mend: 'Write the decimal mark as a point.',
			...(betweenDigits(found, line) && { replacement: '.' }),
		});
	if (found.text === ')' || found.text === ']') {
		const previous = tokens[tokens.indexOf(found) - 1];
		if (message.startsWith('Value expected') && previous)
			return new Trouble(
				'syntax',
				place,
				`A value is missing between \`${asTyped(previous.text)}\` and \`${found.text}\`.`,
			);
		return new Trouble('syntax', place, `This \`${found.text}\` closes no bracket.`, {
			mend: 'Remove it.',
			replacement: '',
		});
	}
	if (message.startsWith('Digit expected'))
		return new Trouble('syntax', place, 'The exponent of this number is incomplete.');
	if (message.startsWith('Unexpected part'))
		return new Trouble('syntax', place, `\`${asTyped(found.text)}\` follows without an operator.`, {
			mend:
				found.kind === 'number'
					? 'Write a number without spaces, or put an operator.'
					: 'Put an operator.',
		});
	return new Trouble(
		'syntax',
		place,
		`\`${asTyped(found.text)}\` stands where a value is expected.`,
	);
}

function whole(line: string): { from: number; to: number } {
	return { from: line.length - line.trimStart().length, to: Math.max(1, line.trimEnd().length) };
}

function before(tokens: Token[]): { from: number; to: number } {
	const equals = tokens.findIndex((token) => token.text === '=');
	const last = tokens[Math.max(0, equals - 1)];
	return { from: tokens[0]?.from ?? 0, to: last?.to ?? 1 };
}

function betweenDigits({ from, to }: Token, line: string): boolean {
	return /\d$/.test(line.slice(0, from)) && /^\d/.test(line.slice(to));
}
