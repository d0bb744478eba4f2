/** A value and its partial derivatives, one for each number that the function takes, in that order. */
export interface Worked {
	value: number;
	derivatives: number[];
}
