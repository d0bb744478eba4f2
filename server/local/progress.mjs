/**
 * A duration as the progress lines show it.
 * @param {number} ms
 */
export function seconds(ms) {
	return `${(ms / 1000).toFixed(1)} s`;
}

/**
 * Runs one step and shows its title, its time, and what it has to say (`work` may return a short remark).
 * @param {string} title
 * @param {() => unknown} work
 */
export async function step(title, work) {
	const from = performance.now();
	process.stdout.write(`${title.padEnd(34, ' .')} `);
	try {
		const remark = await work();
		const note = typeof remark === 'string' ? `  ${remark}` : '';
		process.stdout.write(`${seconds(performance.now() - from).padStart(8)}${note}\n`);
	} catch (error) {
		process.stdout.write(`${seconds(performance.now() - from).padStart(8)}  failed\n`);
		throw error;
	}
}
