/** Values that examples of the API share, so that they read as one story. */
export const DESIGNATION_EXAMPLE = 'D26L01-b';
export const INSTANT_EXAMPLE = '2026-12-01T03:41:27Z';
export const ID_EXAMPLE = '3f6c1e0a-5b7d-4c21-9a53-0d4f6f2b8e10';
