/** A latitude in plain figures: `28.31° S`. */
export function formatLat(latDeg: number): string {
	return `${Math.abs(latDeg).toFixed(2)}° ${latDeg < 0 ? 'S' : 'N'}`;
}

/** A longitude in plain figures: `69.92° W`. */
export function formatLon(lonDeg: number): string {
	return `${Math.abs(lonDeg).toFixed(2)}° ${lonDeg < 0 ? 'W' : 'E'}`;
}

/** A field of view, two significant figures: `0.56 deg²`. */
export function formatAreaDeg2(areaDeg2: number): string {
	return `${Number(areaDeg2.toPrecision(2))} deg²`;
}

/** A stretch of time for people: `8 h`, `45 min`, `3 d`. */
export function formatSpan(ms: number): string {
	const minutes = Math.round(ms / 60_000);
	if (minutes < 60) return `${minutes} min`;
	const hours = minutes / 60;
	return hours < 48 ? `${Number(hours.toFixed(1))} h` : `${Number((hours / 24).toFixed(1))} d`;
}
