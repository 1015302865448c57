import { forms } from '$lib/domain/references';

export const match = (value: string): boolean => forms.model.test(value);
