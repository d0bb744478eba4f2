import { installClocks } from './clock';

// Vitest runs this before a test file and what it imports.
installClocks();
// Every page of a fault run lives in this one process, and each listens for its end.
process.setMaxListeners(0);
