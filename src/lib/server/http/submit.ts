import { fail, type ActionFailure, type RequestEvent } from '@sveltejs/kit';
import { setError, type SuperValidated } from 'sveltekit-superforms';
import type { Actor } from '$lib/domain/actor';
import { Invalid } from '$lib/domain/faults';
import type { Ctx } from '$lib/server/context';
import { refuseWith } from './faults';
import { signedIn } from './serve';

/** `/a/0/b` as superforms writes it: `a[0].b`. */
const path = (pointer: string): string =>
	pointer
		.split('/')
		.slice(1)
		.map((key, i) => (/^\d+$/.test(key) ? `[${key}]` : i === 0 ? key : `.${key}`))
		.join('');

/** Puts each issue at its field; what names no field of this form stands above it. */
export const showIssues = <T extends Record<string, unknown>>(
	form: SuperValidated<T>,
	issues: Invalid['issues']
): void => {
	for (const { pointer, message } of issues) {
		const field = pointer.split('/')[1];
		const known = field !== undefined && Object.hasOwn(form.data, field);
		const where = known ? path(pointer) : '';
		setError(form as SuperValidated<Record<string, unknown>>, where, message);
	}
	form.valid = false;
};

/**
 * Runs a form action's verb. What is not valid, by the form's own schema or by the verb, comes back with the form
 * as it was typed; refusals and absences are error pages.
 */
export const submit = async <T extends Record<string, unknown>, R>(
	event: RequestEvent,
	form: SuperValidated<T>,
	work: (ctx: Ctx, actor: Actor, data: T) => R | Promise<R>
): Promise<R | ActionFailure<{ form: SuperValidated<T> }>> => {
	const actor = signedIn(event);
	if (!form.valid) return fail(400, { form });
	try {
		return await work(event.locals.ctx, actor, form.data);
	} catch (fault) {
		if (fault instanceof Invalid) {
			showIssues(form, fault.issues);
			return fail(400, { form });
		}
		return refuseWith(event, fault);
	}
};
