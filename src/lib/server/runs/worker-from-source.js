// Runs the worker's TypeScript source where nothing is built yet: development and tests.
import { register } from 'tsx/esm/api';

register();
const source = './worker.ts';
export const { compute, parse } = await import(source);
