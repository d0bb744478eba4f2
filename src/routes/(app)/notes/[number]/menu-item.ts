/** An entry of a menu. */
export interface MenuItem {
	name: string;
	run: () => void;
	/** Cannot be done now. */
	off?: boolean;
	/** What it does takes the focus elsewhere; otherwise the focus returns to the menu's button. */
	keepsFocus?: boolean;
}
