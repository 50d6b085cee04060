/** The only place where query keys exist. */
export const queryKeys = {
	board: ['board'] as const,
	regionOutline: (designation: string, version: number) =>
		['regionOutline', designation, version] as const
};
