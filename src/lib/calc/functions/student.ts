import { student as distribution } from '../doubt/distributions/student';
import { stated } from './stated';

export const student = stated(
	{
		name: 'student',
		signature: 'student(x, u, dof)',
		help: 'A value with standard uncertainty u that rests on few readings: scaled t distribution with degrees of freedom.',
		examples: [{ source: 'student(10 V, 10 mV, 4)', result: '10.000 V ± 0.028 V' }],
		source: 'JCGM 101:2008, 6.4.9',
	},
	[3, 3],
	[1],
	([u = 0, dof = 1]) => distribution(u, dof),
);
