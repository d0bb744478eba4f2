/** A window that is out of sight paints nothing. */
const longestMs = 50;

/**
 * Does work once the page has painted what was done just now: who types sees the key before the page tells anybody
 * else. Where nothing is painted it is done in the next microtask.
 */
export function afterPaint(work: () => void): void {
	if (typeof document === 'undefined' || document.hidden) return queueMicrotask(work);
	let isDone = false;
	const once = () => {
		if (isDone) return;
		isDone = true;
		work();
	};
	requestAnimationFrame(() => setTimeout(once));
	setTimeout(once, longestMs);
}
