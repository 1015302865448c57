import type { Handle } from '../db/handle';
import { logHead as headQuery } from './log.queries';

/** How far the log goes: number of entries, and the time of the last one ("" while there is none). */
export const logHead = (from: Handle): { readonly size: number; readonly at: string } =>
	from.first<{ size: number; at: string }>(headQuery(from.q))!;
