import type { EvidenceMediaType } from './check-content';

const extension: Record<EvidenceMediaType, string> = { 'application/pdf': '.pdf', 'image/png': '.png' };
const longestName = 120;

/* Device names of Windows, which no file may bear there whatever its extension. */
const device = /^(con|prn|aux|nul|com\d|lpt\d)(\.|$)/i;

/**
 * A file's name for reading and for the downloader's disk: the last part of any path, without control characters,
 * marks that turn the direction of writing, signs that a file system refuses, or an extension that belies the content.
 * It is never part of a path of ours.
 */
export function cleanFileName(name: string, mediaType: EvidenceMediaType): string {
	const ending = extension[mediaType];
	const plain = name
		.normalize('NFC')
		.split(/[/\\]/)
		.at(-1)
		?.replace(/\p{Zs}|\p{Zl}|\p{Zp}|\p{Cc}/gu, ' ')
		.replace(/[\p{Cf}\p{Cs}\p{Co}\p{Cn}]/gu, '')
		.replace(/[<>:"|?*%]/g, '_')
		.replace(/\s+/g, ' ')
		.replace(/^[.\s]+|[.\s]+$/g, '');
	const stem = plain?.toLowerCase().endsWith(ending) ? plain.slice(0, -ending.length) : plain;
	const short = Array.from(stem ?? '').slice(0, longestName - ending.length);
	const kept = short.join('').replace(/^[.\s]+|[.\s]+$/g, '');
	return `${kept === '' ? 'file' : device.test(kept) ? `_${kept}` : kept}${ending}`;
}

/**
 * Content-Disposition for a download (RFC 6266, with the extended form of RFC 8187 for what ASCII cannot say).
 * @param name cleaned already; quoted and encoded again here, so that no name can end the header.
 */
export function attachment(name: string): string {
	const ascii = name.replace(/[^\x20-\x7e]/g, '_').replace(/["\\]/g, '_');
	const encoded = encodeURIComponent(name.toWellFormed()).replace(
		/['()*]/g,
		(sign) => `%${sign.charCodeAt(0).toString(16).toUpperCase()}`
	);
	return `attachment; filename="${ascii}"; filename*=UTF-8''${encoded}`;
}
