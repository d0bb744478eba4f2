import { calculation, prose, requirement, type Sheet } from './sheet';

// Coefficients of the platinum resistor: IEC 60751, 0 °C and above; below it the cubic term is left out,
// which is less than a millikelvin at −5 °C.
export const waterTemperature: Sheet = {
	title: 'Pt1000 water temperature',
	cells: [
		prose(
			'## Purpose',
			'',
			'Measures the water temperature from −5 °C to 40 °C with a Pt1000 in two-wire connection, as a ratio to the converter’s own reference: the reference drives the sensor through {{R_ser}}, so its drift cancels.',
		),
		prose(
			'## Sensor',
			'',
			'Resistance after IEC 60751: {{R_cold}} at the cold end, {{R_hot}} at the warm end.',
		),
		calculation(
			'R_0 = tolerance(1000 ohm, 0.12 %)  # at 0 °C, class B of IEC 60751',
			'a_pt = 3.9083e-3  # per °C, IEC 60751',
			'b_pt = -5.775e-7  # per °C squared, IEC 60751',
			'R_pt(theta) = R_0 * (1 + a_pt * theta + b_pt * theta^2)',
			'R_cold = R_pt(-5)  # at −5 °C',
			'R_hot = R_pt(40)  # at 40 °C',
			'T_span = 45 K  # width of the range',
		),
		prose(
			'## Bridge and amplifier',
			'',
			'A gain of {{gain}} spreads the range over {{V_span}} at the converter, {{s_T: mV/K}} on the average. One step is {{T_step: mK}}.',
		),
		calculation(
			'V_ref = tolerance(2.5 V, 0.1 %)  # reference of converter and sensor',
			'N_bits = 12  # resolution of the converter',
			'R_ser = tolerance(10 kohm, 0.1 %)  # series resistor',
			'gain = 8',
			'V_cold = gain * divider(V_ref, R_ser, R_cold)',
			'V_hot = gain * divider(V_ref, R_ser, R_hot)',
			'V_span = V_hot - V_cold',
			's_T = V_span / T_span  # average sensitivity',
			'T_step = lsb(V_ref, N_bits) / s_T  # one step as temperature',
		),
		prose(
			'## Self-heating and leads',
			'',
			'The sensor turns {{P_heat}} into heat and is warmer than still water by {{T_heat: mK}}. Two wires of the probe cable add {{R_lead}}, which reads as {{T_lead: mK}}; firmware subtracts it.',
		),
		calculation(
			'I_hot = V_ref / (R_ser + R_hot)  # current through the sensor, warm end',
			'P_heat = I_hot^2 * R_hot',
			'k_diss = tolerance(2.5 mW/K, 20 %)  # dissipation of the probe in still water',
			'T_heat = P_heat / k_diss  # self-heating',
			'R_lead = tolerance(0.34 ohm, 10 %)  # 4 m of cable, both wires',
			'T_lead = R_lead / (R_hot - R_cold) * T_span  # the same as temperature',
		),
		requirement(
			'V_hot <= 0.98 * V_ref  # room for over-range',
			'T_step <= 100 mK  # resolution',
			'T_heat <= 50 mK  # self-heating',
			'T_lead <= 100 mK  # before it is subtracted',
		),
	],
};
