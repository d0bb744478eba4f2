/** An answer to whoever holds the paper: it ships no scripts. */
export const csr = false;
