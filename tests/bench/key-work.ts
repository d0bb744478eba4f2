import type { Browser, Page } from '@playwright/test';

/** What one key made the page's main thread do, in ms. */
export interface KeyWork {
	/** Until the first paint after it. */
	toPaint: number;
	/** The same without what it waited for a processor, which it shares with the server, the database and this program. */
	toPaintProcessor: number;
	/** Until the next key: with the server's answer and what follows from it. */
	all: number;
}

/** An event of a trace; times in µs, `tdur` on the processor. */
interface TraceEvent {
	name: string;
	pid: number;
	tid: number;
	ts: number;
	dur?: number;
	tdur?: number;
	args?: { data?: { type?: string } };
}

/** Without the timeline's own tasks: with them the browser counts every node of the page at each frame, 1.5 ms of a long note. */
const categories = ['devtools.timeline', 'toplevel'];

/** Types keys where the cursor stands, one after the other, and gives the work of each. */
export async function keyWork(
	browser: Browser,
	page: Page,
	keys: readonly string[],
	pauseMs: number,
): Promise<KeyWork[]> {
	await browser.startTracing(page, { categories });
	for (const key of keys) {
		await page.keyboard.press(key);
		await page.evaluate((ms) => new Promise((resolve) => setTimeout(resolve, ms)), pauseMs);
	}
	const { traceEvents } = JSON.parse((await browser.stopTracing()).toString()) as {
		traceEvents: TraceEvent[];
	};
	return workIn(traceEvents);
}

/** The work of each key press in a trace. */
function workIn(events: readonly TraceEvent[]): KeyWork[] {
	const presses = events.filter(
		({ name, args }) => name === 'EventDispatch' && args?.data?.type === 'keydown',
	);
	const first = presses[0];
	if (!first) throw new Error('the trace holds no key');
	const main = events
		.filter(({ pid, tid }) => pid === first.pid && tid === first.tid)
		.sort((a, b) => a.ts - b.ts);
	const tasks = main.filter(({ name }) => name === 'ThreadControllerImpl::RunTask');
	const paints = main.filter(({ name }) => name === 'Paint');
	return presses.map((press, index) => {
		const until = presses[index + 1]?.ts ?? Infinity;
		const own = tasks.filter(({ ts, dur = 0 }) => ts + dur > press.ts && ts < until);
		const painted = paints.find(({ ts }) => ts > press.ts)?.ts ?? Infinity;
		const before = own.filter(({ ts }) => ts <= painted);
		return {
			toPaint: sum(before.map(({ dur = 0 }) => dur)),
			toPaintProcessor: sum(before.map(({ tdur = Infinity }) => tdur)),
			all: sum(own.map(({ dur = 0 }) => dur)),
		};
	});
}

function sum(times: readonly number[]): number {
	return times.reduce((total, one) => total + one, 0) / 1000;
}
