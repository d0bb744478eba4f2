import { level } from '../tables/decibels';
import { pure } from '../types';
import { expectUnit } from './in-unit';
import { tabled } from './tabled';

const milliwatt = 1e-3;

export const dBm = tabled({
	name: 'dBm',
	signature: 'dBm(P)',
	help: 'A power as a level in decibels above 1 mW.',
	examples: [{ source: 'dBm(2 W)', result: '33.0103' }],
	source: 'NIST SP 811 (2008), 8.7',
	count: [1, 1],
	type: ([power]) => {
		expectUnit(power, 'W', 'The power');
		return pure;
	},
	names: { quantity: 'P' },
	answer: ([power]) => level(Number(power), milliwatt, 'power'),
});
