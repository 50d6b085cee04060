import type { ParamMatcher } from '@sveltejs/kit';

/** A circular's number: whole, from 1, within PostgreSQL's integer. */
export const match: ParamMatcher = (param) => /^[1-9]\d{0,8}$/.test(param);
