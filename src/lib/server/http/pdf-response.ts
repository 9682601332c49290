/** A PDF made by this service; its name is ours, so that it needs no quoting beyond the plain form. */
export function pdfResponse(pdf: Buffer, name: string, disposition: 'attachment' | 'inline'): Response {
	return new Response(new Uint8Array(pdf), {
		headers: {
			'content-type': 'application/pdf',
			'content-length': String(pdf.length),
			'content-disposition': `${disposition}; filename="${name.replace(/[^A-Za-z0-9._-]/g, '-')}"`,
			'cache-control': 'private, no-store'
		}
	});
}
