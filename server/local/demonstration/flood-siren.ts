import { calculation, prose, requirement, type Sheet } from './sheet';

/** Frozen and withdrawn; its capacitor brings up the caution. */
export const floodSiren: Sheet = {
	title: 'Flood siren capacitor voltage',
	cells: [
		prose(
			'## Purpose',
			'',
			'Reads the voltage of the capacitor that drives the flood siren, up to {{V_cap}}, so that the logger knows whether the siren would sound. At the top of the range the converter sees {{V_adc}}.',
		),
		calculation(
			'V_cap = 80 V  # capacitor, fully charged',
			'C_cap = 4700 uF  # siren capacitor',
			'E_cap = C_cap * V_cap^2 / 2  # stored energy',
			'R_1 = tolerance(1 Mohm, 1 %)  # upper arm',
			'R_2 = tolerance(30 kohm, 1 %)  # lower arm',
			'V_adc = divider(V_cap, R_1, R_2)  # at the converter',
			't_bleed = R_1 * C_cap * log(V_cap / (60 V))  # until the divider alone brought it to 60 V',
		),
		requirement('V_adc <= 2.45 V  # room below the reference of 2.5 V'),
	],
};
