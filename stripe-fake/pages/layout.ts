import type { HttpAnswer } from '../http/answer';

export const escapeHtml = (text: string): string =>
	text.replace(/[&<>"']/g, (sign) => `&#${sign.charCodeAt(0)};`);

const style = `:root{color-scheme:light dark}*{box-sizing:border-box}
body{font:1rem/1.5 sans-serif;max-width:36rem;margin:0 auto;padding:1.5rem 1rem 4rem}
h1{font-size:1.4rem;margin:1rem 0 .5rem}h2{font-size:1.1rem;margin:2rem 0 .5rem}
.standin{border:2px dashed;padding:.5rem .75rem}.fault{border-left:.4rem solid;padding:.25rem .75rem;font-weight:bold}
label{display:block;margin:.75rem 0 0}input{display:block;width:100%;max-width:22rem;font:inherit;padding:.5rem}
button{font:inherit;padding:.6rem 1rem;margin:1rem 1rem 0 0}table{border-collapse:collapse;width:100%}
th,td{text-align:left;vertical-align:top;padding:.3rem .75rem .3rem 0;border-bottom:1px solid #8886}
td.amount,th.amount{text-align:right;padding-right:0}code{white-space:nowrap}a,button{min-height:2.75rem}
.links a{display:inline-block;padding:.5rem 1rem .5rem 0}.wide{overflow-x:auto}`;

/** @param status of the answer @param content HTML */
export function page(status: number, title: string, content: string): HttpAnswer {
	return {
		status,
		headers: {
			'content-type': 'text/html; charset=utf-8',
			'cache-control': 'no-store',
			'referrer-policy': 'no-referrer',
			'x-content-type-options': 'nosniff',
			// No form-action: paying leads back to whatever address the session names.
			'content-security-policy': "default-src 'none'; style-src 'unsafe-inline'; frame-ancestors 'none'"
		},
		body: `<!doctype html>
<html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width, initial-scale=1">
<title>${escapeHtml(title)}</title><style>${style}</style></head>
<body>
<p class="standin">This is a local stand-in for a payment service. It runs on this machine alone and takes no money.</p>
<main>
<h1>${escapeHtml(title)}</h1>
${content}
</main>
</body></html>
`
	};
}

export const notFound = (): HttpAnswer =>
	page(404, 'There is no such page', '<p>The address may have expired, or was copied in part.</p>');

/** @param text shown above a form; empty for none */
export const fault = (text: string): string =>
	text === '' ? '' : `<p class="fault" role="alert">${escapeHtml(text)}</p>`;

export const link = (address: string | null, text: string): string =>
	address === null ? '' : `<a href="${escapeHtml(address)}">${escapeHtml(text)}</a>`;
