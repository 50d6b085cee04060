/** The only place where query keys exist. */
export const queryKeys = {
	board: ['board'] as const
};
