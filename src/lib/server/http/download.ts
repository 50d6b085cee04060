/** A file as an answer that a browser saves under `name`. */
export function download(file: {
	body: Uint8Array | string;
	type: string;
	name: string;
}): Response {
	const { body, type, name } = file;
	return new Response(typeof body === 'string' ? body : new Uint8Array(body), {
		headers: {
			'content-type': type,
			'content-disposition': `attachment; filename="${name}"`,
			'cache-control': 'private, no-cache'
		}
	});
}
