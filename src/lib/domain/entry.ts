import type { Means, PersonId, Role } from './actor';
import type { EventType, Payload } from './events';

/** A fresh passkey assertion over the statement that was signed; base64url, verifies offline. */
export interface StepUp {
	readonly statement: string;
	readonly credential: string;
	readonly authenticatorData: string;
	readonly clientDataJSON: string;
	readonly signature: string;
}

/** Why an act was allowed: what the permission table answered. */
export interface Grant {
	readonly rule: string;
	readonly role?: Role;
	readonly model?: string;
	/** Folio up to which no touching of the model was found within the look-back. */
	readonly lookBackClear?: number;
}

export interface Auth extends Grant {
	readonly means: Means;
	readonly token?: string;
	readonly stepUp?: StepUp;
}

/** One of the subjects of an entry: its n-th entry, and the folio of the one before. */
export interface Subject {
	readonly n: number;
	readonly prev: number | null;
	readonly ref: string;
}

/** One entry of the log, as its canonical bytes say it. */
export interface Entry<T extends EventType = EventType> {
	readonly seq: number;
	readonly at: string;
	readonly clock?: { readonly raw: string; readonly reason: 'behind' | 'jump' };
	readonly type: T;
	readonly v: number;
	readonly actor: PersonId | 'system' | 'cli';
	readonly behalf?: PersonId;
	readonly subjects: readonly Subject[];
	readonly payload: Payload<T>;
	readonly auth: Auth;
	readonly request: string;
}
