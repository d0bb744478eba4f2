/** Opens what stands behind a worked line. One line is open at a time. */
export interface Opener {
	/** Name of the quantity whose line is open. */
	readonly opened: string | undefined;
	/** Opens a quantity's line, or closes it where it is open. */
	toggle(name: string): void;
}
