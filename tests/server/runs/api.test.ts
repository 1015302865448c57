import type { RequestEvent } from '@sveltejs/kit';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { Actor, Scope } from '$lib/domain/actor';
import { settled } from '$lib/server/runs/execution';
import * as models from '../../../src/routes/api/v1/models/+server';
import * as model from '../../../src/routes/api/v1/models/[model=model]/+server';
import * as signs from '../../../src/routes/api/v1/models/[model=model]/signs/+server';
import * as versions from '../../../src/routes/api/v1/models/[model=model]/versions/+server';
import * as modelRuns from '../../../src/routes/api/v1/models/[model=model]/runs/+server';
import * as runs from '../../../src/routes/api/v1/runs/+server';
import * as run from '../../../src/routes/api/v1/runs/[run=run]/+server';
import * as cancel from '../../../src/routes/api/v1/runs/[run=run]/cancel/+server';
import * as result from '../../../src/routes/api/v1/runs/[run=run]/result/+server';
import * as version from '../../../src/routes/api/v1/versions/[model=model]/[n=ordinal]/+server';
import { lossOnUnemployment } from '../../domain/specification-example';
import { modelInput, unemploymentUp } from '../register/bank';
import { manualPool, type ManualPool } from './pool';
import { openSetting, type Setting } from './setting';

let pool: ManualPool;
let setting: Setting;
beforeEach(async () => {
	pool = manualPool();
	setting = await openSetting(pool);
});
afterEach(() => setting.bank.close());

interface Asked {
	readonly query?: string;
	readonly params?: Record<string, string>;
	readonly body?: unknown;
	readonly actor?: Actor;
}

/** Calls a handler as the router would, behind the guard. */
const call = async (
	handler: unknown,
	{ query = '', params = {}, body, actor = setting.owner }: Asked = {}
): Promise<{ status: number; body: Record<string, unknown>; location: string | null }> => {
	const url = new URL(`http://localhost:3000/api/v1/x${query}`);
	const request = new Request(url, {
		...(body !== undefined && {
			method: 'POST',
			headers: { 'content-type': 'application/json' },
			body: JSON.stringify(body)
		})
	});
	const event = { url, params, request, locals: { ctx: setting.bank.ctx, actor, requestId: 'r' } };
	const response = await (handler as (event: RequestEvent) => Promise<Response>)(
		event as unknown as RequestEvent
	);
	return {
		status: response.status,
		body: (await response.json()) as Record<string, unknown>,
		location: response.headers.get('location')
	};
};

const token = (...scopes: Scope[]): Actor => ({ ...setting.owner, means: 'token', token: 't_1', scopes });

describe('/api/v1/models', () => {
	it('lists by reference, filtered, a page at a time', async () => {
		for (const name of ['Second', 'Third'])
			await call(models.POST, { body: { ...modelInput({ name, materiality: 1 }), uses: ['plan'] } });
		const refs = (answer: { body: Record<string, unknown> }): string[] =>
			(answer.body['models'] as { ref: string }[]).map(({ ref }) => ref);
		const first = await call(models.GET, { query: '?limit=2' });
		expect(refs(first)).toEqual(['M-001', 'M-002']);
		expect(first.body['next']).toBe('M-002');
		expect(refs(await call(models.GET, { query: '?limit=2&after=M-002' }))).toEqual(['M-003']);
		expect(refs(await call(models.GET, { query: '?tier=3' }))).toEqual(['M-002', 'M-003']);
		expect(refs(await call(models.GET, { query: '?state=submitted&tier=' }))).toEqual(['M-001']);
		expect(refs(await call(models.GET, { query: '?verdict=no+run&due=365' }))).toEqual(['M-001']);
		const wrong = await call(models.GET, { query: '?state=sunk&after=14' });
		expect(wrong).toMatchObject({ status: 400, body: { issues: [{ pointer: '/state' }] } });
	});

	it('registers with 201 and the address, and names each wrong field', async () => {
		const made = await call(models.POST, { body: modelInput() });
		expect(made).toMatchObject({ status: 201, location: '/api/v1/models/M-002', body: { ref: 'M-002' } });
		const refused = await call(models.POST, { body: { ...modelInput(), name: '', secret: 1 } });
		expect(refused.status).toBe(400);
		expect((refused.body['issues'] as { pointer: string }[]).map(({ pointer }) => pointer)).toEqual([
			'/name',
			''
		]);
		expect(await call(models.POST, { body: modelInput(), actor: token('read') })).toMatchObject({
			status: 403,
			body: { rule: 'token-scope' }
		});
		expect(await call(models.POST, { body: modelInput(), actor: setting.validator })).toMatchObject({
			status: 403
		});
	});

	it('shows a model whole to its owner and its header to another', async () => {
		const params = { model: setting.model };
		expect((await call(model.GET, { params })).body).toMatchObject({
			ref: 'M-001',
			purpose: expect.any(String),
			versionList: [{ ref: 'M-001/1', state: 'submitted' }],
			runs: { planned: 0, validation: 0, exploratory: 0 }
		});
		const other = setting.bank.person('S. Oduya', 'owner');
		expect((await call(model.GET, { params, actor: other })).body).toEqual({
			ref: 'M-001',
			name: expect.any(String),
			tier: expect.any(Object),
			state: 'submitted'
		});
		expect(await call(model.GET, { params: { model: 'M-404' } })).toMatchObject({ status: 404 });
	});
});

describe('/api/v1 from signs to a version', () => {
	it('goes the way a script goes', async () => {
		const { body } = await call(models.POST, { body: modelInput() });
		const params = { model: body['ref'] as string };
		const specification = lossOnUnemployment();
		const early = await call(versions.POST, { params, body: { specification } });
		expect(early).toMatchObject({ status: 403, body: { rule: 'signs-first' } });
		// Nothing of the refused submission stayed.
		expect((await call(versions.GET, { params })).body).toEqual({ versions: [] });
		expect(await call(signs.POST, { params, body: { drivers: [unemploymentUp] } })).toMatchObject({
			status: 201,
			body: { n: 1 }
		});
		expect((await call(signs.GET, { params })).body).toMatchObject({ inForce: [{ series: 'unemp' }] });
		const made = await call(versions.POST, {
			params,
			body: { specification },
			actor: token('data', 'submit-draft')
		});
		expect(made).toMatchObject({ status: 201, location: '/api/v1/versions/M-002/1' });
		expect((await call(version.GET, { params: { ...params, n: '1' } })).body).toMatchObject({
			state: 'submitted',
			specification
		});
		const wrong = await call(versions.POST, {
			params,
			body: { specification: { ...specification, dependent: 'lost' }, reason: 'x' }
		});
		expect(wrong).toMatchObject({ status: 400, body: { issues: [{ pointer: '/dependent' }] } });
	});
});

describe('/api/v1/runs', () => {
	it('are accepted with 202, followed by their state, and end with a result', async () => {
		const params = { model: setting.model };
		const body = { version: setting.version, vintage: setting.vintage, purpose: 'planned' };
		const asked = await call(modelRuns.POST, { params, body, actor: token('run') });
		expect(asked).toMatchObject({ status: 202, location: '/api/v1/runs/R-0001', body: { run: 'R-0001' } });
		const of = { run: 'R-0001' };
		expect((await call(run.GET, { params: of })).body).toMatchObject({ state: 'queued', mayCancel: true });
		expect(await call(result.GET, { params: of })).toMatchObject({ status: 409 });
		pool.held[0]!.finish({ answer: 42 });
		await settled(setting.bank.ctx, 'R-0001');
		expect((await call(result.GET, { params: of })).body).toEqual({ answer: 42 });
		await call(modelRuns.POST, { params, body: { ...body, purpose: 'exploratory' } });
		expect((await call(cancel.POST, { params: { run: 'R-0002' }, body: {} })).body).toMatchObject({
			state: 'cancelled'
		});
		const listed = (await call(runs.GET, { query: '?limit=1' })).body;
		expect(listed).toMatchObject({ runs: [{ ref: 'R-0002' }], next: 'R-0002' });
		expect((await call(runs.GET, { query: '?before=R-0002&purpose=planned' })).body).toMatchObject({
			runs: [{ ref: 'R-0001', state: 'finished' }]
		});
	});

	it('are hidden from whom the model is hidden, and refused for another model’s version', async () => {
		const params = { model: setting.model };
		const body = { version: setting.version, vintage: setting.vintage, purpose: 'planned' };
		await call(modelRuns.POST, { params, body });
		const stranger = setting.bank.person('S. Oduya', 'owner');
		expect(await call(run.GET, { params: { run: 'R-0001' }, actor: stranger })).toMatchObject({
			status: 404
		});
		expect((await call(runs.GET, { actor: stranger })).body).toEqual({ runs: [] });
		expect(await call(modelRuns.POST, { params: { model: 'M-002' }, body })).toMatchObject({
			status: 400,
			body: { issues: [{ pointer: '/version' }] }
		});
		expect(await call(modelRuns.POST, { params, body: { ...body, purpose: 'for fun' } })).toMatchObject({
			status: 400
		});
	});
});
