import type { Case } from './case';
import circuits from './data/circuits.json';
import ea402 from './data/ea402.json';
import gumH from './data/gum-h.json';
import gumS1 from './data/gum-s1.json';
import iec60062 from './data/iec60062.json';
import iec60063 from './data/iec60063.json';
import jcgm106 from './data/jcgm106.json';
import strd from './data/nist-strd.json';
import temperature from './data/temperature.json';
import units from './data/units.json';
import { madeColumns } from './made-columns';

/** Cases of one field. */
export interface CaseGroup {
	id: string;
	title: string;
	cases: Case[];
}

/** All published cases, those too that the language cannot state. */
export const caseGroups: readonly CaseGroup[] = [
	group('uncertainty', 'Uncertainty of measurement, JCGM 100', gumH),
	group('trials', 'Propagation of distributions, JCGM 101', gumS1),
	group('calibration', 'Calibration budgets, EA-4/02', ea402),
	group('conformity', 'Conformity with limits, JCGM 106 and ILAC-G8', jcgm106),
	group('curves', 'Least squares and statistics, NIST StRD', strd),
	group('temperature', 'Platinum, thermocouples and thermistors', temperature),
	group('units', 'Units, levels and constants', units),
	group('circuits', 'Circuits and converters', circuits),
	group('preferred', 'Preferred values, IEC 60063', iec60063),
	group('marking', 'Marking codes, IEC 60062', iec60062),
];

/** A published case by its id. Throws where there is none. */
export function findCase(id: string): Case {
	const found = caseGroups.flatMap(({ cases }) => cases).find((each) => each.id === id);
	if (!found) throw new Error(`No case ${id}`);
	return found;
}

function group(id: string, title: string, data: { cases: unknown }): CaseGroup {
	const cases = (data.cases as Case[]).map((each) => {
		const readings = madeColumns[each.id]?.();
		return readings ? { ...each, readings } : each;
	});
	return { id, title, cases };
}
