export { recordAttachment, recordFileName, recordFormat } from './attachment';
export { buildReportModel, composeAnswer, type BuildContext } from './build';
export { dayText, instantText } from './dates';
export { unmetDuties, type Duty } from './duties';
export { equationNumbers, equationRows } from './equations';
export { figureRows, temperatureTeller } from './figures';
export * from './model';
export {
	changedPlaces,
	compareLines,
	reportLines,
	wholeLine,
	type ComparedLine,
	type ReportLine
} from './lines';
export { averagesOf, comparisonSentence, figureNumbers, figureText, personText } from './reviewer-figure';
export type * from './source';
export { emptyReportText, type ReportText } from './text';
