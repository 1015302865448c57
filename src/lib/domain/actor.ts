/** A person's random id: `p_` and 26 base32 characters (128 random bits). Names never stand beside it in the log. */
export type PersonId = `p_${string}`;

/** The five roles; *developer* is a relation to a model, not a role. */
export const roles = ['owner', 'validator', 'head', 'auditor', 'admin'] as const;
export type Role = (typeof roles)[number];

/** How the actor proved who they are. `seat` exists only in a demo register and is named by verifiers. */
export const means = ['passkey', 'password', 'token', 'recovery', 'seat', 'cli', 'system'] as const;
export type Means = (typeof means)[number];

/** What an API token may do at most; its owner's rights of the moment bound it further. */
export const scopes = ['read', 'write', 'data', 'run', 'submit-draft', 'export'] as const;
export type Scope = (typeof scopes)[number];

/** Who acts, as read afresh on every request. */
export interface Actor {
	readonly person: PersonId | 'system' | 'cli';
	readonly means: Means;
	/** Roles held at this moment. */
	readonly roles: readonly Role[];
	/** Id (hash) of the session, when there is one. */
	readonly session?: string;
	/** Public id of the API token, when one was presented. */
	readonly token?: string;
	readonly scopes?: readonly Scope[];
	/** Joins the entry to the server's log lines. */
	readonly request: string;
}

/** The register itself, for what happens without a person. */
export const system = (request: string): Actor =>
	Object.freeze({ person: 'system', means: 'system', roles: [], request });
