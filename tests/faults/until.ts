/** Waits until the condition holds, and throws where it does not in time. */
export async function until(
	condition: () => unknown,
	limitMs: number,
	what = 'this did not come true',
): Promise<void> {
	// Made here, so that its stack names the caller.
	const late = new Error(`${what} within ${limitMs / 1000} s`);
	const end = performance.now() + limitMs;
	while (!(await condition())) {
		if (performance.now() > end) throw late;
		await pause(10);
	}
}

/** Whether the condition comes true in time. */
export async function comesTrue(condition: () => unknown, limitMs: number): Promise<boolean> {
	return until(condition, limitMs).then(
		() => true,
		() => false,
	);
}

/** How long something lasts or how fast it goes; what waits for something uses `until`. */
export function pause(ms: number): Promise<void> {
	return new Promise((resolve) => setTimeout(resolve, ms));
}
