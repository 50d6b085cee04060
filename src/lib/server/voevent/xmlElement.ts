import { DomainError } from '../domainError';

/** An element with the texts of its own, entities resolved; names are without their namespace prefix. */
export type XmlElement = {
	name: string;
	/** Where it stands, for refusals: `/VOEvent/Who/Date`. */
	pointer: string;
	attributes: ReadonlyMap<string, string>;
	children: readonly XmlElement[];
	text: string;
};

/** The first child of that name. */
export function childOf(parent: XmlElement | undefined, name: string): XmlElement | undefined {
	return parent?.children.find((child) => child.name === name);
}

/** The child of that name; two of it are refused, as nothing says which one holds. */
export function onlyChildOf(parent: XmlElement | undefined, name: string): XmlElement | undefined {
	const [first, second] = childrenOf(parent, name);
	if (second) throw refusal(second.pointer, 'is there twice; only one can be meant');
	return first;
}

export function childrenOf(parent: XmlElement | undefined, name: string): XmlElement[] {
	return parent?.children.filter((child) => child.name === name) ?? [];
}

/** The element at the end of a path of only children. */
export function elementAt(
	root: XmlElement | undefined,
	...names: string[]
): XmlElement | undefined {
	return names.reduce((at, name) => onlyChildOf(at, name), root);
}

/** An `xs:float` as a finite number; null for what does not parse, NaN and infinities included. */
export function floatOf(text: string | undefined): number | null {
	const trimmed = text?.trim() ?? '';
	if (trimmed.length > 60 || !/^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/.test(trimmed))
		return null;
	const value = Number(trimmed);
	return Number.isFinite(value) ? value : null;
}

/** A refusal that names one place in the document. */
export function refusal(pointer: string, detail: string): DomainError {
	return new DomainError('invalid', `${pointer} ${detail}.`, [{ pointer, detail }]);
}
