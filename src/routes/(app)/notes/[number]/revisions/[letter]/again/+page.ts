/** Like the revision it speaks of, it ships no scripts. */
export const csr = false;
