export {
	answerSentence,
	answerText,
	averagesSentence,
	drivers,
	driversSentence,
	inputName,
	intervalLine,
	leadingOutput,
	outputSpec,
	wordedOutputs,
	type Driver,
	type NamedMethod,
	type WordedOutput,
	type WordingOptions
} from './answer';
export { britishEnglish, type Catalogue } from './catalogue';
export { cautionLead } from './caution';
export { wordingCitations } from './citations';
export { findingSentences, type WordedFinding } from './finding';
export {
	capitalise,
	cite,
	joinPhrases,
	listed,
	plainText,
	strong,
	type Phrase,
	type PhrasePart
} from './phrase';
export {
	percent,
	presentDifference,
	presentOutput,
	presentStated,
	printedDecimals,
	probability,
	share,
	type PresentedOutput
} from './present';
export {
	differenceUnit,
	isTemperatureUnit,
	temperatureDifferenceOn,
	temperatureOn,
	type TemperatureScale
} from './temperature';
export { outputsOf } from './outputs';
export { distributionText, uncertaintyNotes } from './uncertainty';
