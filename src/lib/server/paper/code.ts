import { env } from '../env';
import { addressOf } from './address';
import { qrOf, type QrCode } from './qr';

/** What leads from print to the public page that says whether a revision is still the current one. */
export function codeOf(digest: string): QrCode & { address: string } {
	const address = addressOf(digest, env().ORIGIN);
	return { ...qrOf(address), address };
}
