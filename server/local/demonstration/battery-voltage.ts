import { calculation, prose, requirement, type Sheet } from './sheet';

/** Frozen as A for a range of 30 V; `widened` turns it into what was frozen as B. */
export const batteryVoltage: Sheet = {
	title: 'Station battery voltage channel',
	cells: [
		prose(
			'## Purpose',
			'',
			'Brings the voltage of the 24 V station battery into the range of the logger’s 12-bit converter. At {{V_max}}, the top of the range, the converter sees {{V_adc}}, which leaves {{spare: %}} of the reference for over-range.',
		),
		prose(
			'## Input divider',
			'',
			'The upper arm stays at {{R_1}}, a part of 0.1 %: it keeps the standing current of the divider at {{I_div}}, small against what the logger draws while it sleeps. The lower arm is the E96 value nearest to {{R_exact}}.',
		),
		calculation(
			'V_max = 30 V  # top of the range',
			'V_ref = tolerance(2.5 V, 0.1 %)  # reference of the converter, over temperature',
			'N_bits = 12  # resolution of the converter',
			'V_target = 0.965 * 2.5 V  # wanted at the top of the range',
			'R_1 = tolerance(470 kohm, 0.1 %)  # upper arm',
			'R_exact = value(R_1) * V_target / (V_max - V_target)  # lower arm that would give it exactly',
			'R_2 = tolerance(preferred(R_exact, E96), 0.1 %)  # lower arm as fitted',
			'V_adc = divider(V_max, R_1, R_2)  # at the converter',
			'spare = 1 - V_adc / V_ref  # share of the reference left',
			'I_div = V_max / (R_1 + R_2)  # standing current',
		),
		prose(
			'## Converter loading',
			'',
			'The converter samples through {{R_s}}. Its sampling capacitor settles to half a step in {{t_settle}}; firmware allows {{t_sample}}. The input leakage shifts the reading by {{V_leak}}, less than one step.',
		),
		calculation(
			'R_s = parallel(R_1, R_2)  # source resistance',
			'C_s = tolerance(14 pF, 20 %)  # sampling capacitor',
			't_sample = 10 us  # sampling time set in firmware',
			't_settle = R_s * C_s * log(2^(N_bits + 1))  # to half a step',
			'I_leak = rectangular(10 nA, 3 nA)  # input leakage at 60 °C',
			'V_leak = I_leak * R_s  # its effect at the converter',
		),
		prose(
			'## Resolution',
			'',
			'One step of the converter is {{V_step}}, which is {{V_step_batt}} at the battery. The top of the range reads {{n_top}}. Firmware multiplies the reading by {{V_step_batt}}.',
		),
		calculation(
			'V_step = lsb(V_ref, N_bits)  # one step at the converter',
			'V_step_batt = V_step * (R_1 + R_2) / R_2  # one step at the battery',
			'n_top = code(V_adc, V_ref, N_bits)  # reading at the top of the range',
		),
		requirement(
			'V_adc <= 0.98 * V_ref  # room for over-range',
			't_settle <= t_sample  # the capacitor settles',
			'V_leak <= V_step  # leakage hides in one step',
			'V_step_batt <= 10 mV  # resolution at the battery',
			'I_div <= 100 uA  # standing current',
		),
	],
};

/** What the step from A to B changed: cell by its place on the sheet, text that went, text that came. */
export const widened = [
	{ cell: 2, from: 'V_max = 30 V', to: 'V_max = 32 V' },
	{
		cell: 0,
		from: 'leaves {{spare: %}} of the reference for over-range.',
		to: 'leaves {{spare: %}} of the reference for over-range.\n\nThe new charge regulator equalises with up to 31.2 V on a cold day. Revision A ended at 30 V.',
	},
] as const;
