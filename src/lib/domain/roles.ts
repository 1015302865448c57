import type { Role } from './actor';

const words: Readonly<Record<Role, string>> = {
	owner: 'model owner',
	validator: 'validator',
	head: 'head of model risk',
	auditor: 'auditor',
	admin: 'administrator'
};

/** A role as people say it. */
export const roleWord = (role: Role): string => words[role];

/** The roles of a person in words; "no role" where there is none. */
export const roleWords = (roles: readonly Role[]): string => roles.map(roleWord).join(', ') || 'no role';
