/**
 * A duration as the progress lines show it.
 * @param {number} ms
 */
export function seconds(ms) {
	return `${(ms / 1000).toFixed(1)} s`;
}

/**
 * Runs one step and shows its beginning, its time, and what it has to say (`work` may return a short remark). Several
 * may run at once.
 * @param {string} title
 * @param {() => unknown} work
 */
export async function step(title, work) {
	const from = performance.now();
	process.stdout.write(`          ${title} …\n`);
	/** @param {unknown} remark */
	const done = (remark) => {
		const time = seconds(performance.now() - from).padStart(8);
		const note = typeof remark === 'string' ? `: ${remark}` : '';
		process.stdout.write(`${time}  ${title}${note}\n`);
	};
	try {
		done(await work());
	} catch (error) {
		done('failed');
		throw error;
	}
}
