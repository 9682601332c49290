/** The client memo: the question and the answer first, then whatever a reviewer needs to do it again. */
import type { Template } from '../template';
import { assumptions } from '../shared/assumptions';
import {
	changeHistory,
	endMark,
	howToCheck,
	notices,
	opinion,
	references,
	reviewAndSignature,
	scopeAndReliance
} from '../shared/closing';
import { footer, header, noonLine, reportId } from '../shared/page-frame';
import { questionAndAnswer } from '../shared/question-answer';
import { results } from '../shared/results';
import { titleBlock } from '../shared/title-block';
import { howSure, leftOut } from '../shared/uncertainty';
import { figures, working } from '../shared/working';
import { clientMemoWords } from './wording';

/** A memo stays short: of each calculation the one figure that shows its answer. */
const figuresPerRun = 1;

export const template: Template = {
	id: 'client-memo',
	kind: clientMemoWords.kind,
	description: clientMemoWords.description,
	async layout(kit, model, { draft, signedAt }) {
		const content = [
			...titleBlock(kit, model, clientMemoWords.kind, draft),
			...questionAndAnswer(kit, model),
			...results(kit, model),
			...assumptions(kit, model),
			...(await working(kit, model)),
			...(await figures(kit, model, figuresPerRun)),
			...howSure(kit, model),
			...leftOut(kit, model),
			...opinion(kit, model),
			...scopeAndReliance(kit, model),
			...reviewAndSignature(kit, model, signedAt),
			...changeHistory(kit, model),
			...howToCheck(kit, model, draft),
			...notices(kit, model),
			...references(kit),
			endMark(kit, reportId(model))
		];
		return {
			content,
			footer: footer(kit, model, draft),
			header: header(kit, model),
			background: () => noonLine()
		};
	}
};
