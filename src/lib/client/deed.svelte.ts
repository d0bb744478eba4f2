/** What a person does to the server from a page, one at a time, with what is said when it fails. */
export class Deed {
	busy = $state(false);
	failure = $state('');

	/** Does it unless one is under way; what fails throws an Error with a sentence, which is kept to be shown. */
	async run(work: () => Promise<unknown>): Promise<void> {
		if (this.busy) return;
		this.busy = true;
		this.failure = '';
		try {
			await work();
		} catch (error) {
			this.failure = (error as Error).message;
		}
		this.busy = false;
	}
}
