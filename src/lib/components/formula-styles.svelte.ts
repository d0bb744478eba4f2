import { createContext } from 'svelte';

/** Whether something on the page wants the styles of formulas, which are as many as all others of a sheet. */
export class FormulaStyles {
	#wanted = $state(false);

	get wanted(): boolean {
		return this.#wanted;
	}

	want(): void {
		this.#wanted = true;
	}
}

export const [getFormulaStyles, setFormulaStyles] = createContext<FormulaStyles>();
