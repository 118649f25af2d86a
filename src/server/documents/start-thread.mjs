// A thread does not inherit the loader by which the process reads TypeScript.
import { register } from 'tsx/esm/api';

register();
await import('./certificate-thread.ts');
