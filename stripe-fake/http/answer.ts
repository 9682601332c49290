/** A request as the rest sees it. */
export type HttpRequest = {
	method: string;
	path: string;
	query: string;
	headers: { [name: string]: string | undefined };
	body: string;
};

/** What is sent back; `reset` cuts the connection instead. */
export type HttpAnswer = {
	status: number;
	headers: Record<string, string>;
	body: string | Uint8Array;
	reset?: boolean;
};

export const json = (status: number, value: unknown, headers: Record<string, string> = {}): HttpAnswer => ({
	status,
	headers: { 'content-type': 'application/json', ...headers },
	body: JSON.stringify(value, null, 2)
});

export const redirect = (to: string): HttpAnswer => ({ status: 303, headers: { location: to }, body: '' });
