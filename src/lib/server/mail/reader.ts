import { env } from '../env';

/** Where mails can be read in development; null anywhere else. */
export function mailReader(): string | null {
	const { NOONMARK_MODE, MAIL_READER_URL } = env();
	return NOONMARK_MODE === 'development' ? (MAIL_READER_URL ?? null) : null;
}
