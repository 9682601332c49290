import type { Page } from '@playwright/test';

/**
 * Listens to a page for what must never happen: a request that leaves the service, a breach of its content security
 * policy, an error of a script, an answer that fails.
 * @param expected status of an answer that is no fault: that of an error page looked at on purpose
 */
export function watch(page: Page, address: string, expected?: number): string[] {
	const faults: string[] = [];
	const { origin } = new URL(address);
	page.on('request', (request) => {
		const url = new URL(request.url());
		if (url.protocol !== 'data:' && url.protocol !== 'blob:' && url.origin !== origin)
			faults.push(`A request leaves the service: ${request.url()}`);
	});
	page.on('response', (response) => {
		if (response.status() >= 400 && response.status() !== expected && response.request().method() === 'GET')
			faults.push(`${response.status()} for ${response.url()}`);
	});
	page.on('requestfailed', (request) => {
		const reason = request.failure()?.errorText ?? '';
		// A page left while an answer is under way.
		if (!reason.includes('ERR_ABORTED')) faults.push(`${request.url()} failed: ${reason}`);
	});
	page.on('pageerror', (error) => faults.push(`Script error: ${error.message}`));
	page.on('console', (message) => {
		const byStatus = /Failed to load resource: the server responded with a status of (\d+)/.exec(
			message.text()
		);
		// An answer to a submitted form that is refused, or the error page asked for, is written here by the browser.
		if (byStatus !== null) return;
		if (message.type() === 'error' || message.type() === 'warning')
			faults.push(`Console ${message.type()}: ${message.text()}`);
	});
	return faults;
}
