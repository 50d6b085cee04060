import { alertPacketSchema } from '../../domain/alertPacket';
import { jsonSchemaOf, type JsonSchema } from './jsonSchema';
import { PACKET_FIELDS } from './packetFields';

/** The alert packet's schema with the words for each field; `missing` names fields that have none. */
export function packetSchema(): { schema: JsonSchema; missing: string[] } {
	const schema = jsonSchemaOf(alertPacketSchema);
	const missing: string[] = [];
	describe(schema, '', missing);
	return { schema, missing };
}

function describe(schema: JsonSchema, path: string, missing: string[]): void {
	for (const [name, property] of Object.entries(schema.properties ?? {})) {
		const place = path === '' ? name : `${path}.${name}`;
		// A position's parts mean the same everywhere; a discriminator is named in its variant.
		const words = PACKET_FIELDS[place] ?? PACKET_FIELDS[name];
		if (property.const === undefined) {
			if (words) property.description = words;
			else missing.push(place);
		}
		// Checked one by one where they are read, so that the schema's own items say nothing.
		if (property.type === 'array' && property.items && Object.keys(property.items).length === 0) {
			property.items = { type: 'number', minimum: 0 };
		}
		describe(property, place, missing);
	}
	if (schema.items) describe(schema.items, path, missing);
	for (const variant of schema.oneOf ?? []) {
		const place = `${path}(${String(variant.properties?.kind?.const)})`;
		const words = PACKET_FIELDS[place];
		if (words) variant.description = words;
		else missing.push(place);
		describe(variant, place, missing);
	}
}
