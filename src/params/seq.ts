export const match = (value: string): boolean => /^(?:0|[1-9]\d{0,15})$/.test(value);
