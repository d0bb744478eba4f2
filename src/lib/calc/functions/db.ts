import { level } from '../tables/decibels';
import { pure } from '../types';
import { expectPure } from './function';
import { expectText } from './quoted';
import { levelOf } from './level-of';
import { tabled } from './tabled';

export const dB = tabled({
	name: 'dB',
	signature: 'dB(ratio[, "power"])',
	help: 'A ratio in decibels: 20 lg of a ratio of voltages or currents, 10 lg of a ratio of powers.',
	examples: [
		{ source: 'dB(5 V / 50 mV)', result: '40' },
		{ source: 'dB(100, "power")', result: '20' },
	],
	source: 'NIST SP 811 (2008), 8.7',
	count: [1, 2],
	type: ([ratio, word]) => {
		if (ratio) expectPure(ratio, 'The ratio');
		expectText(word, 'What the ratio is of', 'power');
		return pure;
	},
	names: { quantity: 'ratio' },
	answer: ([ratio, word]) => level(Number(ratio), 1, levelOf(word)),
});
