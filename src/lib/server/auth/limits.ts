const minuteMs = 60_000;
const dayMs = 24 * 60 * minuteMs;

/** How long a session lasts without use. */
export const idleMs = 7 * dayMs;

/** How long a session lasts however much it is used. */
export const absoluteMs = 30 * dayMs;

/** How often use is written down. */
export const touchMs = 60 * minuteMs;
