import { people } from '$lib/server/people/directory';
import { enrol, optionsForLink } from '$lib/server/people/enrolment';
import { firstLinks } from '$lib/server/people/first-start';
import { signInWithPasskey, type Visitor } from '$lib/server/people/sign-in';
import { signInOptions } from '$lib/server/auth/options';
import { secretHash } from '$lib/server/auth/secret';
import { sessionOf } from '$lib/server/auth/sessions';
import { rolesOf } from '$lib/server/people/standing';
import type { Actor, PersonId } from '$lib/domain/actor';
import type { Entry } from '$lib/domain/entry';
import type { Facts } from '$lib/server/context';
import { Authenticator, type Bent, type Kind } from '../../support/authenticator';
import { testRegister, type TestRegister } from '../../support/register';

export const origin = 'http://localhost:3000';
export const password = 'seven gulls over the harbour wall';

export const visitor = (change: Partial<Visitor> = {}): Visitor => ({
	holder: secretHash('door'),
	address: '192.0.2.7',
	agent: 'a browser',
	request: 'test',
	...change
});

/** A register whose names come from its own directory. */
export const bank = async (
	options: { at?: string; facts?: Facts; demo?: boolean } = {}
): Promise<TestRegister> => {
	const register = await testRegister(options);
	return { ...register, ctx: { ...register.ctx, people: people(register.ctx.read) } };
};

export interface Enrolled {
	readonly person: PersonId;
	readonly device: Authenticator;
	readonly codes: readonly string[];
	readonly actor: Actor;
}

export const actorOf = async ({ ctx }: TestRegister, token: string): Promise<Actor> => {
	const session = await sessionOf(ctx, token);
	if (!session) throw new Error('No session');
	const { person, means, hash } = session;
	const roles = rolesOf(ctx.read, person, ctx.now().toISOString());
	return { person, means, roles, session: hash, request: 'test' };
};

/** Enrols the person of a link with a software authenticator. */
export const enrolBy = async (
	register: TestRegister,
	url: string,
	who: { readonly name: string; readonly mail: string; readonly staffNumber: string },
	kind: Kind = 'ES256',
	backup = 0
): Promise<Enrolled> => {
	const { ctx } = register;
	const secret = url.split('#')[1]!;
	const device = new Authenticator('localhost', kind, backup);
	const options = await optionsForLink(ctx, visitor(), { secret, password, identity: who });
	const response = device.create({ challenge: options.challenge, origin, userHandle: options.user.id });
	const { token, codes } = await enrol(ctx, visitor(), { secret, password, response, identity: who });
	const actor = await actorOf(register, token);
	return { person: actor.person as PersonId, device, codes, actor };
};

/** The first two admins, enrolled. */
export const twoAdmins = async (register: TestRegister): Promise<readonly [Enrolled, Enrolled]> => {
	const [first, second] = firstLinks(register.ctx);
	return [
		await enrolBy(register, first.url, {
			name: 'Marta Quill',
			mail: 'marta.quill@bank.example',
			staffNumber: '1001'
		}),
		await enrolBy(register, second.url, {
			name: 'Noor Vance',
			mail: 'noor.vance@bank.example',
			staffNumber: '1002'
		})
	];
};

/** Signs in with a device; undefined when refused. */
export const signIn = async (
	{ ctx }: TestRegister,
	device: Authenticator,
	bent: Bent = {},
	from: Visitor = visitor()
): Promise<string | undefined> => {
	const { challenge } = await signInOptions(ctx, from.holder);
	return signInWithPasskey(ctx, from, device.get({ challenge, origin }, bent));
};

/** Every entry, as stored. */
export const entries = ({ ctx }: TestRegister): Entry[] =>
	ctx.read
		.all<{ body: string }>(ctx.read.q.selectFrom('entry').select('body').orderBy('seq'))
		.map(({ body }) => JSON.parse(body) as Entry);
