import { env } from '../env';

/** Origins of the payment service's own pages, the only foreign place that a form of ours may lead to. */
export function paymentOrigins(): string[] {
	return env()
		.STRIPE_PAGES.split(/\s+/)
		.filter((one) => one !== '')
		.map((one) => new URL(one).origin);
}

/** @returns the address, if it is one of a payment page. @throws Error otherwise: nobody is sent anywhere else */
export function requirePaymentPage(address: string | null): string {
	if (address === null || !URL.canParse(address) || !paymentOrigins().includes(new URL(address).origin)) {
		throw new Error('The payment service named a page that is none of its own (see STRIPE_PAGES).');
	}
	return address;
}
