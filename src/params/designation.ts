import type { ParamMatcher } from '@sveltejs/kit';

export const match: ParamMatcher = (param) => /^D\d{2}[A-L]\d{2}-[a-z]{1,4}$/.test(param);
