import type { Fault } from './fault';
import * as clocks from './kinds/clocks';
import * as connections from './kinds/connections';
import * as database from './kinds/database';
import * as killed from './kinds/killed';
import * as messages from './kinds/messages';
import * as nemesis from './kinds/nemesis';
import * as processes from './kinds/processes';

/** Everything that is tried, in this order; `long` takes part in the long form only. */
export const everyFault: readonly (Fault & { long?: boolean })[] = [
	killed.serverKilled,
	killed.postgresKilled,
	killed.bothKilled,
	killed.postgresRestarted,
	killed.rollingRestart,
	killed.evaluatorKilled,
	database.postgresDown,
	database.postgresSlow,
	database.postgresUnresponsive,
	database.outOfConnections,
	database.diskFull,
	connections.commitCut,
	connections.socketsCut,
	connections.halfOpen,
	{ ...connections.neverTold, long: true },
	connections.notifyLost,
	processes.serverStopped,
	processes.postgresStopped,
	clocks.clocksOff,
	messages.messagesDisturbed,
	nemesis.nemesis,
];
