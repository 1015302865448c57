/** Why the server does not start: one sentence, and the exit code of sysexits.h that says what kind of trouble it is. */
export class StartFault extends Error {
	override readonly name = 'StartFault';
	constructor(
		readonly exitCode: number,
		sentence: string
	) {
		super(sentence);
	}
}
