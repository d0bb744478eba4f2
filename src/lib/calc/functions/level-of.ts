import type { LevelOf } from '../tables/decibels';
import { Refusal } from './function';
import type { Single } from './tabled';

/** What a level is of: amplitudes unless the text "power" says otherwise. Throws Refusal for another text. */
export function levelOf(word: Single = 'amplitude'): LevelOf {
	if (word === 'amplitude' || word === 'power') return word;
	throw new Refusal(
		'A level is one of amplitudes or of powers.',
		'Write `"power"`, or nothing for voltages and currents.',
	);
}
