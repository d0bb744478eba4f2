/** A comparison is read and printed: it ships no scripts, so nothing on it may need one. */
export const csr = false;
