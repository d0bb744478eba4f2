/** Paper for a stranger: it ships no scripts. */
export const csr = false;
