/** The filters as the reader typed them; "" where there is none. */
export interface TypedQuery {
	readonly type: string;
	readonly subject: string;
	readonly actor: string;
	readonly after: string;
	readonly before: string;
}
