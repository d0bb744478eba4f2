import { expect, test } from 'vitest';
import { acknowledgedTooEarly, read } from './trace';

const insert =
	'20 1.000000 recvfrom(9, "P\\0insert into \\"note_update\\" (", 8192, 0, NULL) = 9 <0.000010>';
const asked = '20 1.100000 recvfrom(9, "Q\\0\\0\\0\\vcommit\\0", 8192, 0, NULL) = 12 <0.000010>';
const flushed = '20 1.200000 fdatasync(7) = 0 <0.010000>';
const confirmed =
	'20 1.300000 sendto(9, "C\\0\\0\\0\\vCOMMIT\\0Z", 18, 0, NULL, 0) = 18 <0.000010>';
const acknowledged =
	'10 1.400000 writev(21, [{iov_base="o{\\"ids\\":[\\"e1\\"]"}], 2) = 9 <0.000010>';
const early = (...lines: string[]) => acknowledgedTooEarly(read(lines.join('\n')), ['e1']);

test('an acknowledgement behind the flush and the confirmation of its transaction is in time', () => {
	expect(early(insert, asked, flushed, confirmed, acknowledged)).toEqual([]);
	const [begun, ended] = [
		'20 1.200000 fdatasync(7 <unfinished ...>',
		'20 1.250000 <... fdatasync resumed>) = 0 <0.050000>',
	];
	expect(early(insert, asked, begun, ended, confirmed, acknowledged)).toEqual([]);
});

test('one without a flush, before it, or before the confirmation is too early', () => {
	expect(early(insert, asked, confirmed, acknowledged)).toEqual(['e1']);
	const failed = flushed.replace('= 0', '= -1 EIO (Input/output error)');
	expect(early(insert, asked, failed, confirmed, acknowledged)).toEqual(['e1']);
	const before = flushed.replace('1.2', '1.05').replace('50000', '50');
	expect(early(insert, before, asked, confirmed, acknowledged)).toEqual(['e1']);
	expect(early(insert, asked, flushed, confirmed, acknowledged.replace('1.4', '1.15'))).toEqual([
		'e1',
	]);
	expect(early(insert, asked, flushed, acknowledged)).toEqual(['e1']);
});

test('a transaction without edits counts for nothing, and an edit that was not acknowledged is none in time', () => {
	expect(early(asked, flushed, confirmed, acknowledged)).toEqual(['e1']);
	expect(early(insert, asked, flushed, confirmed)).toEqual(['e1']);
});
