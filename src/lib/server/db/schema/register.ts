/** Tables of the register room. */
export interface RegisterSchema {
	/** One row a model; the tier is what a validator confirmed or two persons overrode, else null. */
	model: {
		ref: string;
		name: string;
		purpose: string;
		portfolio: string;
		/** JSON: the answers to the policy's questions. */
		answers: string;
		tier: number | null;
		tier_how: 'confirmed' | 'overridden' | null;
		tier_reason: string | null;
		/** An override that waits for the head's signature. */
		override_tier: number | null;
		override_reason: string | null;
		override_by: string | null;
		registered_at: string;
		registered_by: string;
		entry: number;
	};
	model_use: { model: string; use: string; entry: number };
	/** Who stood in which relation to a model, and when; ended rows stay. */
	model_party: {
		model: string;
		relation: 'owner' | 'developer' | 'validator';
		person: string;
		from_at: string;
		until_at: string | null;
		entry: number;
	};
	/** Signs and plausible ranges, one row a driver and declaration; later declarations stand beside earlier ones. */
	prior: {
		model: string;
		n: number;
		series: string;
		side: 'owner' | 'validator';
		sign: '+' | '-' | 'any';
		low: number;
		high: number;
		rationale: string;
		late: number;
		at: string;
		by: string;
		entry: number;
	};
	version: {
		ref: string;
		model: string;
		ordinal: number;
		state: 'draft' | 'submitted' | 'withdrawn';
		/** Canonical JSON. */
		specification: string;
		digest: string;
		reason: string;
		predecessor: string | null;
		drafted_by: string;
		drafted_at: string;
		revised_at: string;
		submitted_by: string | null;
		submitted_at: string | null;
		withdrawn_at: string | null;
		withdrawn_reason: string | null;
		entry: number;
	};
}
