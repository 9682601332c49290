/** What an author writes into a report; everything else in it is computed or taken from the dossier. */
export interface ReportText {
	/** The question as the reader should see it; starts from the dossier's. */
	question: string;
	/** Opening lines before the answer; may stay empty. */
	background: string;
	/** The answer in a sentence, composed from the finding and open to edits. */
	answer: string;
	/** Opinion and advice, marked as such. */
	commentary: string;
	/** What was left out, beyond what the method itself lists. */
	leftOut: string;
	/** Who paid for or asked for the work, if it is to be said. */
	commissionedBy: string;
	/** Said outright: there is no addressee. */
	withoutAddressee: boolean;
}

export const emptyReportText: ReportText = {
	question: '',
	background: '',
	answer: '',
	commentary: '',
	leftOut: '',
	commissionedBy: '',
	withoutAddressee: false
};
