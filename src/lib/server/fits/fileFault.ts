/** What is wrong with a file: the place (an HDU with a keyword, column, row or byte) and what it must be. */
export class FileFault extends RangeError {
	override name = 'FileFault';
	constructor(
		readonly place: string,
		readonly detail: string
	) {
		super(`${place} ${detail}`);
	}
}
