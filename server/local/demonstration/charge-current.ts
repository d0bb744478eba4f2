import { calculation, curve, prose, requirement, type Sheet } from './sheet';

export const chargeCurrent: Sheet = {
	title: 'Solar charge current over a shunt',
	cells: [
		prose(
			'## Purpose',
			'',
			'Measures the current from the solar panel into the station battery, up to {{I_max}}, as the voltage over a shunt in the return line. An amplifier brings {{V_sh}} to {{V_adc}} at the converter.',
		),
		prose(
			'## Shunt',
			'',
			'A shunt of {{R_sh}} loses {{P_sh}} at full current, a quarter of what it may. Its four terminals keep the copper of the board out of the reading.',
		),
		calculation(
			'I_max = 12 A  # top of the range',
			'R_sh = tolerance(5 mohm, 0.5 %)  # shunt, four terminals',
			'V_sh = I_max * R_sh  # at full current',
			'P_sh = I_max^2 * R_sh  # lost in the shunt',
			'P_rated = 3 W  # what the shunt may lose at 70 °C',
		),
		prose(
			'## Amplifier',
			'',
			'Non-inverting, with {{R_g}} to ground. The feedback resistor is the E96 value nearest to {{R_f_exact}}, which makes the gain {{gain}}. The offset of the amplifier looks like a current of {{I_offset}}.',
		),
		calculation(
			'V_ref = tolerance(2.5 V, 0.1 %)  # reference of the converter, over temperature',
			'N_bits = 12  # resolution of the converter',
			'R_g = tolerance(1 kohm, 0.1 %)  # gain resistor to ground',
			'R_f_exact = value(R_g * (0.96 * V_ref / V_sh - 1))  # feedback that would give 96 %',
			'R_f = tolerance(preferred(R_f_exact, E96), 0.1 %)  # feedback as fitted',
			'gain = 1 + R_f / R_g',
			'V_adc = V_sh * gain  # at the converter',
			'V_offset = rectangular(0 uV, 15 uV)  # input offset at 25 °C',
			'I_offset = V_offset / R_sh  # the same as a current',
			'I_step = lsb(V_ref, N_bits) / (gain * R_sh)  # one step as a current',
		),
		requirement(
			'V_adc <= 0.98 * V_ref  # room for over-range',
			'P_sh <= 0.5 * P_rated  # the shunt stays cool',
			'I_step <= 5 mA  # resolution',
			'I_offset <= 5 mA  # zero error',
		),
		curve('P_sh over I_max from 0 A to 20 A  # how far the shunt stays cool'),
	],
};
