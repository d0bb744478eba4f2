import { AppError } from '$lib/errors';
import { demand, type Actor } from '../auth/access';
import { download } from '../revisions/sealed-file';
import { knownKeys } from '../signed-record/dropped';
import { check } from '../signed-record/sealed';
import { print, type Paper } from './printing';

/** A frozen revision as a PDF with its sealed record attached. */
export async function ofRevision(
	actor: Actor,
	number: string,
	letter: string,
	paper: Paper,
): Promise<Buffer> {
	demand(actor, 'readFrozen');
	return printGenuine(await download(actor, number, letter), paper);
}

/** The same of its file. Throws AppError `conflict` where the file is not what was sealed. */
export async function printGenuine(file: string, paper: Paper): Promise<Buffer> {
	const { faults } = check(JSON.parse(file), await knownKeys());
	if (faults.length > 0) {
		throw new AppError(
			'conflict',
			`What is stored of this revision is not what was sealed, so no PDF is made of it. ${faults[0]}`,
		);
	}
	return print(file, paper);
}
