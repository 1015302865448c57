/** Tables of the policy room. */
export interface PolicySchema {
	/** One row an adoption, in the order of the log; the last one is in force. */
	policy: {
		adopted: number;
		digest: string;
		release: string;
		document: string | null;
		at: string;
		by: string;
		/** Who proposed it, and the folio of the proposal. */
		proposed_by: string | null;
		proposal: number | null;
		entry: number;
	};
	/** Proposals by the folio of their entry. */
	policy_proposal: {
		proposal: number;
		digest: string;
		release: string;
		document: string | null;
		/** JSON array of the paths whose value differs from the release. */
		changed: string;
		at: string;
		by: string;
		state: 'open' | 'adopted' | 'superseded';
		entry: number;
	};
}
