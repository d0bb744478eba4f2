import type { Options } from './results';

/** Version of what the engine computes. It changes with every change that may change a result. */
export const engineVersion = '0.2.0';

export const defaultOptions: Options = { coverage: 0.95, decisionRule: 'guarded' };
