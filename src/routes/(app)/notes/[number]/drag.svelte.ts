import type { WorkingCopy } from '$lib/client/working-copy.svelte';

/** Way the pointer goes before a press becomes a move, in pixels. */
const threshold = 5;

/** Moving a cell by its terminal: which one is held, and behind which cell it would land. */
export class CellDrag {
	#copy: WorkingCopy;
	#held = $state<string>();
	#target = $state<string | null>();

	constructor(copy: WorkingCopy) {
		this.#copy = copy;
	}

	/** Cell in hand. */
	get held(): string | undefined {
		return this.#held;
	}
	/** Cell behind which it would land, null for the top, undefined where it would stay. */
	get target(): string | null | undefined {
		return this.#target;
	}

	/** Follows a press on a terminal until it ends; gives whether it became a move. */
	follow(press: PointerEvent, cellId: string): Promise<boolean> {
		const terminal = press.currentTarget as HTMLElement;
		terminal.setPointerCapture(press.pointerId);
		return new Promise((resolve) => {
			const ending = new AbortController();
			const { signal } = ending;
			const end = (land: boolean) => {
				ending.abort();
				const moved = this.#held !== undefined;
				if (land && this.#target !== undefined) this.#copy.moveCell(cellId, this.#target);
				this.#held = undefined;
				this.#target = undefined;
				resolve(moved);
			};
			terminal.addEventListener(
				'pointermove',
				(event) => {
					if (!this.#held && Math.abs(event.clientY - press.clientY) < threshold) return;
					this.#held = cellId;
					this.#target = landing(cellId, event.clientY);
					scrollAtEdge(event.clientY);
				},
				{ signal },
			);
			terminal.addEventListener('pointerup', () => end(true), { signal });
			terminal.addEventListener('pointercancel', () => end(false), { signal });
			window.addEventListener('keydown', (event) => event.key === 'Escape' && end(false), {
				signal,
			});
		});
	}
}

/** The cell behind which one that is let go at a height would land. */
function landing(held: string, y: number): string | null | undefined {
	const cells = Array.from(document.querySelectorAll<HTMLElement>('[data-cell]'));
	const isAbove = (cell: HTMLElement) => {
		const { top, height } = cell.getBoundingClientRect();
		return y > top + height / 2;
	};
	const above = cells.filter(isAbove).at(-1)?.dataset.cell ?? null;
	const index = cells.findIndex((cell) => cell.dataset.cell === held);
	const before = cells[index - 1]?.dataset.cell ?? null;
	return above === held || above === before ? undefined : above;
}

function scrollAtEdge(y: number): void {
	const edge = 60;
	if (y < edge) window.scrollBy(0, -12);
	else if (y > window.innerHeight - edge - 46) window.scrollBy(0, 12);
}
