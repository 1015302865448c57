export const match = (value: string): boolean => /^p_[a-z2-7]{26}$/.test(value);
