import { ratioOf } from '../tables/decibels';
import { pure } from '../types';
import { expectPure } from './function';
import { expectText } from './quoted';
import { levelOf } from './level-of';
import { tabled } from './tabled';

export const fromdB = tabled({
	name: 'fromdB',
	signature: 'fromdB(level[, "power"])',
	help: 'The ratio that a level in decibels stands for: of voltages or currents, or of powers.',
	examples: [
		{ source: 'fromdB(40)', result: '100' },
		{ source: 'fromdB(30, "power") * 1 mW', result: '1 W' },
	],
	source: 'NIST SP 811 (2008), 8.7',
	count: [1, 2],
	type: ([level, word]) => {
		if (level) expectPure(level, 'The level');
		expectText(word, 'What the level is of', 'power');
		return pure;
	},
	names: { decibels: 'level' },
	answer: ([level, word]) => ratioOf(Number(level), levelOf(word)),
});
