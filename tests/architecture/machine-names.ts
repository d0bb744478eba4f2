/**
 * Places in a text that only make sense on the machine where it was written: folders of a person or a work place,
 * and the host a package came from.
 */
export function findMachineNames(text: string): string[] {
	return [...text.matchAll(machineName)].map((match) => match[0]);
}

const folders = '(?<![\\w.$}])/(?:home|root|work|Users|mnt)/[\\w.-]+';
const temporary = '(?<![\\w.])/tmp/[\\w-]+';
const hosts = '\\b(?:registry|artifactory|nexus|mirror)\\.[a-z][a-z0-9.-]+\\.[a-z]{2,}';
const machineName = new RegExp(`${folders}|${temporary}|${hosts}|"resolved": "https?:`, 'g');
