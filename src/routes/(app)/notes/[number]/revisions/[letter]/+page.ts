/** A frozen revision is paper: it ships no scripts, so nothing on it may need one. */
export const csr = false;
