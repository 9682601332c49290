/**
 * One spelling for one mailbox: trimmed, composed, lower case. (Mail servers may in theory tell cases apart; none that
 * people use does, and two accounts that differ by case only would invite mistakes.)
 */
export function normaliseEmail(text: string): string {
	return text.trim().normalize('NFC').toLowerCase();
}
