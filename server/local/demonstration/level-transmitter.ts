import { calculation, prose, requirement, type Sheet } from './sheet';

export const levelTransmitter: Sheet = {
	title: 'Level transmitter, 4 to 20 mA',
	cells: [
		prose(
			'## Purpose',
			'',
			'Reads the river level from a submersible transmitter: 4 mA at the sensor’s own depth, 20 mA at {{h_range}} of water above it. The loop current is read as the voltage over a resistor of {{R_b}}.',
		),
		prose(
			'## Loop resistor',
			'',
			'The largest E96 value that keeps {{I_top}} within 98 % of the reference. The converter then sees {{V_bottom}} to {{V_top}}.',
		),
		calculation(
			'h_range = 10 m  # water above the sensor at 20 mA',
			'I_bottom = rectangular(4 mA, 20 uA)  # loop current at no water',
			'I_top = rectangular(20 mA, 20 uA)  # loop current at the top of the range',
			'V_ref = tolerance(2.5 V, 0.1 %)  # reference of the converter, over temperature',
			'N_bits = 12  # resolution of the converter',
			'R_b = tolerance(preferredBelow(value(0.98 * V_ref / I_top), E96), 0.1 %)  # loop resistor as fitted',
			'V_bottom = I_bottom * R_b',
			'V_top = I_top * R_b',
		),
		prose(
			'## Loop supply',
			'',
			'With the battery at its lowest, {{V_batt}}, and {{R_line}} of cable the transmitter still has {{V_tx}} between its terminals.',
		),
		calculation(
			'V_batt = 21 V  # battery before the station switches off',
			'R_line = tolerance(36 ohm, 10 %)  # 500 m of cable, both wires',
			'V_tx = V_batt - I_top * (R_b + R_line)  # left for the transmitter',
		),
		prose('## Resolution', '', 'One step of the converter is {{h_step: mm}} of water.'),
		calculation(
			's_h = (I_top - I_bottom) / h_range  # loop current per metre of water',
			'h_step = lsb(V_ref, N_bits) / (R_b * s_h)  # one step as water level',
		),
		requirement(
			'V_top <= 0.98 * V_ref  # room for over-range',
			'V_tx >= 12 V  # least voltage of the transmitter',
			'h_step <= 5 mm  # resolution',
		),
	],
};
