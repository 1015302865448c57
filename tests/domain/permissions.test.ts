import { describe, expect, test } from 'vitest';
import { roles as everyRole, scopes, type Actor, type PersonId, type Role } from '$lib/domain/actor';
import { actions, permissions, purposes, type Action } from '$lib/domain/permission-table';
import { authorize, type Facts, type ModelFacts } from '$lib/domain/permissions';
import { compatible } from '$lib/domain/separation';

const id = (letter: string): PersonId => `p_${letter.repeat(26)}`;
const [ann, ben, cleo, dov] = [id('a'), id('b'), id('c'), id('d')];

const model: ModelFacts = {
	ref: 'M-001',
	owners: [ann],
	developers: [ben],
	validators: [cleo],
	touched: new Set([ann, ben]),
	searchedTo: 42
};
const actor = (person: PersonId, roles: readonly Role[], more: Partial<Actor> = {}): Actor => ({
	person,
	means: 'passkey',
	roles,
	request: 'test',
	...more
});
const facts = (who: Actor, more: Partial<Facts> = {}): Facts => ({
	actor: who,
	active: true,
	recovered: false,
	admins: 2,
	model,
	...more
});
const rule = (action: Action, given: Facts): string => {
	const answer = authorize(action, given);
	return answer.allowed ? 'allowed' : answer.rule;
};

const owner = actor(ann, ['owner']);
const developer = actor(ben, []);
const validator = actor(cleo, ['validator']);
const head = actor(dov, ['head']);
const stranger = actor(dov, ['owner']);
const auditor = actor(dov, ['auditor']);
const admin = actor(dov, ['admin']);

describe('S11: closed by default', () => {
	test('every action has a row, and the table has no other', () => {
		expect(actions.length).toBeGreaterThan(70);
		for (const action of actions) expect(permissions[action].who).toBeDefined();
	});
	test.each(actions)('%s: nobody without role or relation, unless it is for everybody', (action) => {
		const nobody = actor(id('z'), []);
		const open = JSON.stringify(permissions[action].who) === '["person"]';
		for (const purpose of purposes)
			expect(rule(action, facts(nobody, { purpose }))).toBe(open ? 'allowed' : 'S11');
	});
	test.each(actions)('%s: nobody who is disabled', (action) => {
		for (const role of everyRole)
			expect(rule(action, facts(actor(ann, [role]), { active: false, purpose: 'planned' }))).toBe('S11');
	});
	test.each(actions)('%s: the register itself only where it is named', (action) => {
		const named = JSON.stringify(permissions[action].who).includes('"system"');
		const given = facts({ person: 'system', means: 'system', roles: [...everyRole], request: 'test' });
		expect(rule(action, given)).toBe(named ? 'allowed' : 'S11');
	});
	test('a run without a purpose is refused', () => {
		expect(rule('run.start', facts(owner))).toBe('S11');
	});
});

describe('who may', () => {
	const cases: readonly [Action, Partial<Facts>, string][] = [
		['register.read', {}, 'O D V H A M X'],
		['model.read', {}, 'O D V H A'],
		['version.read', {}, 'O D V H A'],
		['run.read', {}, 'O D V H A'],
		['log.read', {}, 'V H A'],
		['people.read', {}, 'V H A M'],
		['model.register', {}, 'O X'],
		['driver.declare', {}, 'O D'],
		['dataset.store', {}, 'O D'],
		['version.draft', {}, 'O D'],
		['version.submit', {}, 'O'],
		['run.start', { purpose: 'planned' }, 'O D'],
		['run.start', { purpose: 'validation' }, 'V'],
		['run.start', { purpose: 'exploratory' }, 'O D V H'],
		['run.cancel', { starter: ben }, 'D V H'],
		['tier.propose', {}, 'O'],
		['tier.confirm', {}, 'V'],
		['validation.assign', {}, 'H'],
		['party.grant', {}, 'M'],
		['policy.adopt', {}, 'H'],
		['finding.close', {}, 'V'],
		['finding.respond', {}, 'O D'],
		['decision.sign', {}, 'H'],
		['audit.note', {}, 'A'],
		['export.everything', {}, 'H A'],
		['person.invite', {}, 'M'],
		['settings.change', {}, 'M']
	];
	const people: readonly [string, Actor][] = [
		['O', owner],
		['D', developer],
		['V', validator],
		['H', head],
		['A', auditor],
		['M', admin],
		['X', stranger]
	];
	test.each(cases)('%s %j: %s', (action, more, expected) => {
		const may = people
			.filter(([, who]) => rule(action, facts(who, more)) === 'allowed')
			.map(([letter]) => letter);
		expect(may.join(' ')).toBe(expected);
	});
	test('an owner who lost the role is no owner, a validator not either', () => {
		expect(rule('version.submit', facts(actor(ann, [])))).toBe('S11');
		expect(rule('tier.confirm', facts(actor(cleo, ['owner'])))).toBe('S11');
	});
	test('the grant names role, model and the folio searched', () => {
		expect(authorize('tier.confirm', facts(validator))).toEqual({
			allowed: true,
			grant: { rule: 'tier.confirm', role: 'validator', model: 'M-001', lookBackClear: 42 }
		});
	});
});

describe('what is not visible', () => {
	test.each(['version.read', 'data.read', 'run.read', 'entry.read'] as const)(
		'%s of another’s model answers as absent',
		(action) => {
			expect(authorize(action, facts(stranger))).toMatchObject({ allowed: false, visible: false });
		}
	);
	test('that the model exists is known', () => {
		expect(authorize('model.read', facts(stranger))).toMatchObject({ allowed: false, visible: true });
	});
});

describe('S1: whoever touched a model never judges it', () => {
	const judges = ['model-validator', 'head', 'starter'];
	const rows = (action: Action): string[] =>
		[permissions[action].who].flatMap((who) => ('planned' in who ? who.validation : [...who]));
	const judging = actions.filter(
		(action) => !permissions[action].reads && rows(action).every((who) => judges.includes(who))
	);
	test('the acts of judging', () => {
		expect(judging).toEqual(
			expect.arrayContaining([
				'run.start',
				'tier.confirm',
				'finding.close',
				'validation.conclude',
				'decision.sign'
			])
		);
	});
	test.each(judging)('%s', (action) => {
		const both = facts(actor(ann, ['validator', 'head']), {
			purpose: 'validation',
			model: { ...model, owners: [], validators: [ann] }
		});
		expect(rule(action, both)).toBe('S1');
		expect(rule(action, { ...both, model: { ...both.model!, touched: new Set() } })).toBe('allowed');
	});
	test('nobody who touched it is assigned to validate it', () => {
		const person = {
			person: ben,
			roles: ['validator'],
			state: 'enrolled',
			parties: [],
			otherAdmins: 2
		} as const;
		expect(rule('validation.assign', facts(head, { person }))).toBe('S1');
		expect(rule('validation.assign', facts(head, { person: { ...person, person: cleo } }))).toBe('allowed');
	});
	test('reading is not judging', () => {
		expect(rule('model.read', facts(actor(ann, ['validator'])))).toBe('allowed');
	});
});

describe('S4: what one person can be', () => {
	test.each([
		[['admin'], [], true],
		[['admin', 'owner'], [], false],
		[['admin'], ['developer'], false],
		[['auditor'], [], true],
		[['auditor', 'validator'], [], false],
		[['auditor'], ['owner'], false],
		[['head'], [], true],
		[['head', 'validator'], ['validator'], true],
		[['head', 'owner'], [], false],
		[['head'], ['developer'], false],
		[['owner', 'validator'], ['owner', 'validator'], true]
	] as const)('%j with %j: %s', (held, parties, expected) => {
		expect(compatible(held, parties)).toBe(expected);
	});
	test('no relation to a model is given to who may not have it', () => {
		const person = { person: ann, roles: ['head'], state: 'enrolled', parties: [], otherAdmins: 2 } as const;
		expect(rule('party.grant', facts(admin, { person, party: 'owner' }))).toBe('S4');
		expect(rule('party.grant', facts(admin, { person: { ...person, roles: [] }, party: 'developer' }))).toBe(
			'allowed'
		);
	});
});

describe('S9: tokens', () => {
	const never = actions.filter((action) => !permissions[action].scope);
	test('never decide, conclude, close, lower, grant, adopt, export everything, or manage people and credentials', () => {
		expect(never).toEqual(
			expect.arrayContaining([
				'decision.sign',
				'validation.conclude',
				'finding.close',
				'finding.lower-severity',
				'role.grant',
				'role.approve',
				'party.grant',
				'validation.assign',
				'policy.adopt',
				'export.everything',
				'token.create',
				'person.invite',
				'credential.enrol',
				'credential.revoke'
			])
		);
	});
	test.each(never)('%s', (action) => {
		const token = actor(ann, [...everyRole], { means: 'token', token: 'abc', scopes });
		const person = { person: ann, roles: [], state: 'enrolled', parties: [], otherAdmins: 3 } as const;
		expect(rule(action, facts(token, { person, purpose: 'planned' }))).toBe('S9');
	});
	test('the scope is needed, and the owner’s right too', () => {
		const token = (held: Actor['scopes'] & object) => actor(ann, ['owner'], { means: 'token', scopes: held });
		expect(rule('version.submit', facts(token(['submit-draft'])))).toBe('allowed');
		expect(rule('version.submit', facts(token(['read', 'data', 'run'])))).toBe('scope');
		expect(rule('version.submit', facts({ ...token(['submit-draft']), roles: [] }))).toBe('S11');
	});
});

test('a recovery session may enrol a passkey, see its account and end its session, and nothing else', () => {
	const back = actor(ann, ['owner'], { means: 'recovery' });
	const person = { person: ann, roles: [], state: 'enrolled', parties: [], otherAdmins: 3 } as const;
	const open = actions.filter(
		(action) => rule(action, facts(back, { person, purpose: 'planned' })) === 'allowed'
	);
	expect(open).toEqual(['account.read', 'session.end', 'credential.enrol']);
});
