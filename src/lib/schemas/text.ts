import { z } from 'zod';

/** Text that somebody typed, without the one character that the database cannot keep. */
export const typed = z.string().overwrite((text) => text.replaceAll('\0', ''));
