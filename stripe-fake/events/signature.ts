import { createHmac } from 'node:crypto';

/**
 * The header that proves where a delivery comes from: `t=…,v1=…`, an HMAC-SHA256 of time and body.
 * @param secrets separated by commas while one is being replaced: the header then holds a signature of each
 * @param at Unix seconds
 */
export function signatureHeader(body: string, secrets: string, at: number): string {
	const signatures = secrets
		.split(',')
		.map((secret) => createHmac('sha256', secret).update(`${at}.${body}`, 'utf8').digest('hex'));
	return [`t=${at}`, ...signatures.map((signature) => `v1=${signature}`)].join(',');
}
