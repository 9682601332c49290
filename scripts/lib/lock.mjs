import { linkSync, readFileSync, rmSync, writeFileSync } from 'node:fs';

/**
 * When a process began, in the kernel's ticks: with the id it names a process for good, ids being used again.
 * @param {number} processId
 * @returns {string | undefined} undefined where there is no such process (or no /proc to ask)
 */
function beginningOf(processId) {
	try {
		const stat = readFileSync(`/proc/${processId}/stat`, 'utf8');
		// The command's name stands in brackets and may hold anything; fields are counted after it.
		return stat.slice(stat.lastIndexOf(')') + 2).split(' ')[19];
	} catch {
		return undefined;
	}
}

/** @typedef {{ processId: number, beginning: string | undefined, note: string }} Holder */

/** @param {string} file @returns {Holder | undefined} who holds it, if that process still lives */
export function holderOf(file) {
	try {
		/** @type {Holder} */
		const holder = JSON.parse(readFileSync(file, 'utf8'));
		return beginningOf(holder.processId) === holder.beginning && holder.beginning !== undefined
			? holder
			: undefined;
	} catch {
		return undefined;
	}
}

/**
 * Takes a lock that dies with this process.
 * @param {string} file
 * @returns {{ held: true, note: (text: string) => void, release: () => void } | { held: false, holder: Holder }}
 */
export function takeLock(file) {
	const own = `${file}.${process.pid}`;
	/** @param {string} note */
	const write = (note) =>
		writeFileSync(
			own,
			JSON.stringify({ processId: process.pid, beginning: beginningOf(process.pid), note }),
			{ mode: 0o644 }
		);
	write('');
	try {
		for (;;) {
			try {
				// A link is made whole or not at all, and never over an existing file.
				linkSync(own, file);
				break;
			} catch (error) {
				if (/** @type {NodeJS.ErrnoException} */ (error).code !== 'EEXIST') throw error;
				const holder = holderOf(file);
				if (holder !== undefined) return { held: false, holder };
				rmSync(file, { force: true });
			}
		}
	} finally {
		rmSync(own, { force: true });
	}
	return {
		held: true,
		note: (text) =>
			writeFileSync(
				file,
				JSON.stringify({ processId: process.pid, beginning: beginningOf(process.pid), note: text })
			),
		release: () => rmSync(file, { force: true })
	};
}
