/** The pages that references people say aloud (M-014, M-014/3, R-0207, E-12) lead to. */
import { forms, ordinal, parent } from '$lib/domain/references';

/** The address of a reference's page; null for text that names no page. */
export function hrefOfReference(reference: string): string | null {
	if (forms.model.test(reference)) return `/models/${reference}`;
	if (forms.version.test(reference)) return `/models/${parent(reference)}/versions/${ordinal(reference)}`;
	if (forms.dataset.test(reference) || forms.vintage.test(reference)) return `/data/${reference}`;
	if (forms.run.test(reference)) return `/runs/${reference}`;
	if (forms.entry.test(reference)) return `/log/${reference.slice(2)}`;
	return null;
}
