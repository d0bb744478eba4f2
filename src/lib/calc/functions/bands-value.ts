import { readBands } from '../tables/colour-bands';
import { answered } from './answered';
import type { CalcFunction } from './function';
import { inUnit } from './in-unit';
import { expectText, quoted } from './quoted';

export const bandsValue: CalcFunction = {
	name: 'bandsValue',
	signature: 'bandsValue("yellow violet red gold")',
	help: 'Resistance that coloured bands stand for, in reading order. The bands of tolerance and temperature coefficient are read and count for nothing here.',
	examples: [
		{ source: 'bandsValue("yellow violet red gold")', result: '4.7 kΩ' },
		{ source: 'bandsValue("orange grey orange red brown")', result: '38.3 kΩ' },
	],
	source: 'IEC 60062:2016',
	count: [1, 1],
	type: ([colours]) => {
		expectText(colours, 'What the bands show', 'yellow violet red gold');
		return inUnit('ohm');
	},
	compute: ([colours]) => {
		const names = quoted(colours).trim().toLowerCase().split(/[ ,]+/);
		return answered(readBands(names)).ohms;
	},
};
