export const clientMemoWords = {
	kind: 'Client memo',
	description: 'Two to four pages: question, answer, assumptions, working.'
};
