import { level } from '../tables/decibels';
import { pure } from '../types';
import { expectUnit } from './in-unit';
import { tabled } from './tabled';

export const dBV = tabled({
	name: 'dBV',
	signature: 'dBV(V)',
	help: 'A voltage as a level in decibels above 1 V.',
	examples: [{ source: 'dBV(100 mV)', result: '−20' }],
	source: 'NIST SP 811 (2008), 8.7',
	count: [1, 1],
	type: ([voltage]) => {
		expectUnit(voltage, 'V', 'The voltage');
		return pure;
	},
	names: { quantity: 'V' },
	answer: ([voltage]) => level(Number(voltage), 1, 'amplitude'),
});
