import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { DomainError } from '../domainError';
import { statusOf } from '../http/problem';
import { readXml } from './readXml';
import { childOf } from './xmlElement';

function refusalOf(body: string | Buffer): DomainError {
	try {
		readXml(Buffer.from(body));
	} catch (error) {
		if (error instanceof DomainError) return error;
		throw error;
	}
	throw new Error('it was read');
}

describe('what is read', () => {
	it('resolves the predefined entities and numeric references, not those in CDATA', () => {
		const root = readXml(
			Buffer.from(
				'\ufeff<?xml version="1.0" encoding="utf-8"?><!-- <a> & --><?go on?>\n<x:a xmlns:x="u" b="&lt;&#x41;\n&amp;amp;">1 &amp; &#50;<c/><![CDATA[ <d>&amp; ]]>é</x:a>\n'
			)
		);
		expect(root.name).toBe('a');
		expect(root.attributes.get('b')).toBe('<A &amp;');
		expect(root.text).toBe('1 & 2 <d>&amp; é');
		expect(root.children.map(({ pointer }) => pointer)).toEqual(['/a/c']);
	});

	it('takes no harm from names that objects have of their own', () => {
		const root = readXml(
			Buffer.from('<a toString="1" b="2"><hasOwnProperty/><valueOf>2</valueOf><c/></a>')
		);
		expect(root.attributes.get('b')).toBe('2');
		expect(root.attributes.get('valueOf')).toBeUndefined();
		expect(childOf(root, 'constructor')).toBeUndefined();
		expect(childOf(root, 'c')?.pointer).toBe('/a/c');
	});
});

describe('what is refused, naming byte and line, before it can do harm', () => {
	const bomb = `<?xml version="1.0"?>\n<!DOCTYPE a [<!ENTITY b "x">${'<!ENTITY c "&b;&b;&b;&b;">'.repeat(9)}]><a>&c;</a>`;
	it.each<[string, string | Buffer, RegExp]>([
		['entities that multiply', bomb, /entities are not taken.* at byte 22, line 2/],
		[
			'an entity from elsewhere',
			'<!DOCTYPE a [<!ENTITY x SYSTEM "file:///etc/hostname">]><a>&x;</a>',
			/not taken.* at byte 0/
		],
		['a document type further on', '<a><!DOCTYPE b></a>', /at byte 3/],
		['an entity declaration', '<a><!ENTITY b "c"></a>', /at byte 3/],
		['an unknown entity', '<a>é&nbsp;</a>', /there is another at byte 5/],
		['an unknown entity in an attribute', '<a b="&c;"/>', /at byte 6/],
		['a reference to no character', '<a>&#0;</a>', /at byte 3/],
		['a reference to half a character', '<a>&#xD800;</a>', /at byte 3/],
		['a control character', '<a>\u0001</a>', /does not allow at byte 3/],
		['41 levels', '<a>'.repeat(41) + '</a>'.repeat(41), /more than 40 deep at byte 120/],
		['very many levels', '<a>'.repeat(80_000), /more than 40 deep/],
		['very many elements', `<a>${'<b/>'.repeat(20_001)}</a>`, /more than 20000 elements/],
		[
			'very many attributes',
			`<a ${Array.from({ length: 65 }, (_, n) => `b${n}=""`).join(' ')}/>`,
			/64 attributes at byte 0/
		],
		['another encoding', '<?xml version="1.0" encoding="ISO-8859-1"?><a/>', /ISO-8859-1/],
		['UTF-16', Buffer.from('\ufeff<a/>', 'utf16le'), /UTF-8 from byte 0/],
		[
			'bytes that are no UTF-8',
			Buffer.concat([Buffer.from('<a>\ufffdé'), Buffer.from([0xff])]),
			/UTF-8 from byte 8/
		],
		['nothing', '', /empty/],
		['blanks', ' \n', /empty/],
		['text only', 'GRB', /There is no element at byte 3/],
		['a body cut inside an element', '<a>\n<b></b>', /ends inside an element at byte 11, line 2/],
		['a body cut inside a tag', '<a b="1"', /ends inside a tag/],
		['a body cut inside an attribute', '<a b="1', /inside an attribute/],
		['a body cut inside a comment', '<a><!-- ', /inside a comment/],
		['a body cut inside CDATA', '<a><![CDATA[ ', /inside a CDATA/],
		['elements that cross', '<a>\n<b></a></b>', /well-formed.* at byte \d+, line 2/],
		['two roots', '<a/><b/>', /second root element at byte 4/],
		['signs without names', '<a ===/>', /not well-formed at byte 1/],
		['an attribute without a value', '<a b/>', /not well-formed at byte 1/],
		['an attribute without quotes', '<a b=1/>', /not well-formed at byte 1/],
		['attributes without a space', `<a b="1"c='2'/>`, /not well-formed at byte 8/],
		['an empty name', '<a>< b/></a>', /not well-formed at byte 4/],
		['an attribute twice', '<a b="1" b="2"/>', /repeated.* byte \d/],
		['a reserved name', '<a><__proto__ b="1"/></a>', /reserved name is used at byte 4/],
		['a reserved attribute', '<a constructor="1"/>', /reserved name is used at byte 2/]
	])('%s', (_, body, message) => {
		const error = refusalOf(body);
		expect(error.message).toMatch(message);
		expect(error.code).toBe('malformedBody');
	});

	it('a body of more than 1 MiB', () => {
		const error = refusalOf(`<a>${' '.repeat(1024 * 1024)}</a>`);
		expect(statusOf(error.code)).toBe(413);
	});

	it('every beginning of a packet', () => {
		const whole = readFileSync('fixtures/packets/voeventReport.xml');
		const end = whole.toString('latin1').trimEnd().length;
		for (let length = 0; length < end; length++) {
			const error = refusalOf(whole.subarray(0, length));
			expect(error.code, String(length)).toBe('malformedBody');
			expect(error.message, String(length)).toMatch(/byte \d|empty/);
		}
	});
});

describe('bodies made to take long take no longer than others of their size', () => {
	const size = 256 * 1024;
	it.each([
		['tags in tags', '<a '.repeat(size / 3)],
		['attributes without values', `<a ${'b '.repeat(size / 2)}/>`],
		['references', `<a>${'&amp;'.repeat(size / 5)}</a>`],
		['one reference after many tags', `<a>${'<b/>'.repeat(19_000)}&amp;</a>`],
		['blanks in a tag', `<a${' '.repeat(size)}/>`],
		['a long name', `<${'a'.repeat(size)}/>`],
		['quotes', `<a b="${"'".repeat(size)}"/>`],
		['comments', `<a>${'<!---->'.repeat(size / 7)}</a>`],
		['instructions', `<a>${'<?x?>'.repeat(size / 5)}</a>`],
		['sections', `<a>${'<![CDATA[]]>'.repeat(size / 12)}</a>`],
		['lines', `<a>${'\n'.repeat(size)}<b></a>`],
		[
			'replacement characters',
			Buffer.concat([Buffer.from('\ufffd'.repeat(size / 3)), Buffer.from([0x80])])
		],
		['declarations that do not end', `<?xml ${'encoding '.repeat(size / 9)}?><a/>`]
	])('%s', (_, body) => {
		const start = performance.now();
		try {
			readXml(Buffer.from(body));
		} catch (error) {
			expect(error).toBeInstanceOf(DomainError);
		}
		expect(performance.now() - start).toBeLessThan(3000);
	});
});
