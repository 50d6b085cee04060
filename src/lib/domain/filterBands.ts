/**
 * Wavelengths that a filter lets through, nanometres: centre plus and minus half its width at half maximum, to 5 nm.
 * Lower-case letters as of Fukugita et al. 1996 (AJ 111, 1748), U to I as of Bessell 2005 (ARA&A 43, 293), J, H and K as of
 * Cohen et al. 2003 (AJ 126, 1090), all from memory; `clear` is common practice for a silicon detector, without a source.
 */
export const FILTER_BANDS_NM: Record<string, { fromNm: number; toNm: number }> = {
	u: { fromNm: 325, toNm: 385 },
	g: { fromNm: 410, toNm: 545 },
	r: { fromNm: 555, toNm: 690 },
	i: { fromNm: 685, toNm: 840 },
	z: { fromNm: 865, toNm: 960 },
	U: { fromNm: 335, toNm: 395 },
	B: { fromNm: 390, toNm: 480 },
	V: { fromNm: 505, toNm: 590 },
	R: { fromNm: 560, toNm: 720 },
	I: { fromNm: 720, toNm: 875 },
	J: { fromNm: 1155, toNm: 1315 },
	H: { fromNm: 1535, toNm: 1785 },
	K: { fromNm: 2030, toNm: 2290 },
	clear: { fromNm: 350, toNm: 1000 }
};
