import type { Role } from '$lib/schemas/role';

/** Everybody's password in the demonstration, which is meant for one machine. */
const password = 'halfdigit-demo-2026';

function account(name: string, mailbox: string, role: Role) {
	return { name, email: `${mailbox}@alderfen.example`, password, role };
}

/** The firm and its people are invented. */
export const firm = 'Alder Fen Telemetry';
export const accounts = {
	reader: account('Tove Rask', 'reader', 'reader'),
	engineer: account('Pia Ekdahl', 'engineer', 'engineer'),
	peer: account('Cass Kettering', 'peer', 'engineer'),
	approver: account('Anouk Halder', 'approver', 'approver'),
	administrator: account('Milo Sandvik', 'administrator', 'administrator'),
};
