import { error } from '@sveltejs/kit';
import type { PageLoad } from './$types';
import { filterOf, type ModelsPage } from './register-rows';

/**
 * The register through its own API: on the first request the server asks itself, afterwards the browser asks, so that
 * a changed filter fetches rows and not a page.
 */
export const load: PageLoad = async ({ fetch, url, data }) => {
	const query = filterOf(url.searchParams);
	query.set('limit', '1000');
	const models: ModelsPage['models'][number][] = [];
	for (let more = true; more;) {
		const response = await fetch(`/api/v1/models?${query}`);
		if (!response.ok) {
			const problem = (await response.json()) as { detail?: string };
			error(response.status, problem.detail ?? 'The register could not be read.');
		}
		const page = (await response.json()) as ModelsPage;
		models.push(...page.models);
		more = page.next !== undefined;
		if (page.next !== undefined) query.set('after', page.next);
	}
	return { ...data, models };
};
