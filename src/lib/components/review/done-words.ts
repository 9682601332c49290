/** What a page says of the action that led to it, by the word in its address; nothing else is ever shown from there. */
const words: Readonly<Record<string, string>> = {
	remark: 'The remark is on its line.',
	answer: 'The answer stands under the remark.',
	settled: 'The remark is settled.',
	unsettled: 'The remark is open again.',
	figure: 'The figure stands beside the result, and is printed with it.',
	withdrawn: 'The figure is taken back and no longer printed. It is kept here.',
	returned: 'The report is returned; its author gets a mail.',
	approved: 'The report is approved; its author gets a mail.',
	sent: 'The report is sent for review; those who were asked get a mail.',
	recalled: 'The report is taken back from review. It is a draft again.',
	reopened: 'The report is a draft again, and its approval is void.'
};

export function doneWords(done: string | null): string | null {
	return done !== null && Object.hasOwn(words, done) ? (words[done] ?? null) : null;
}
