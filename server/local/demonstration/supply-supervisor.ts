import { calculation, prose, requirement, type Sheet } from './sheet';

export const supplySupervisor: Sheet = {
	title: 'Supply supervisor threshold',
	cells: [
		prose(
			'## Purpose',
			'',
			'Holds the logger in reset while its supply is too low. The threshold must lie above {{V_low}}, where the memory begins to fail, and below {{V_high}}, so that a loaded regulator does not trip it.',
		),
		prose(
			'## Threshold divider',
			'',
			'The comparator trips at {{V_trip}}: its own threshold of {{V_th}}, seen through the divider. From E24 the nearest upper arm to {{R_1_exact}} is {{R_1}}, which puts the threshold too high. To be settled with the buyers: an E96 part would do.',
		),
		calculation(
			'V_th = tolerance(0.6 V, 0.5 %)  # threshold of the comparator',
			'V_want = 3.1 V  # wanted threshold of the supply',
			'R_2 = tolerance(100 kohm, 0.1 %)  # lower arm',
			'R_1_exact = value(R_2 * (V_want / V_th - 1))  # upper arm that would give it exactly',
			'R_1 = tolerance(preferred(R_1_exact, E24), 0.1 %)  # upper arm as fitted',
			'V_trip = V_th * (R_1 + R_2) / R_2  # threshold of the supply',
			'I_div = 3.3 V / (R_1 + R_2)  # standing current',
		),
		prose(
			'## Release',
			'',
			'The comparator releases {{V_hyst_supply: mV}} above the threshold, at {{V_release}}.',
		),
		calculation(
			'V_hyst = tolerance(9 mV, 20 %)  # hysteresis of the comparator',
			'V_hyst_supply = V_hyst * (R_1 + R_2) / R_2  # the same at the supply',
			'V_release = V_trip + V_hyst_supply',
		),
		calculation(
			'V_low = 3.0 V  # memory works down to here',
			'V_high = 3.15 V  # regulator at full load, lowest',
		),
		requirement(
			'V_low < V_trip < V_high  # threshold within the window',
			'V_release <= 3.24 V  # the logger starts again',
			'I_div <= 10 uA  # standing current',
		),
	],
};
