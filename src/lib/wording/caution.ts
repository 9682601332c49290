import type { Caution } from '../calculation/types';
import { britishEnglish, type Catalogue } from './catalogue';

/** Bold first words of a caution: its subject, or its level where the code is not known here. */
export function cautionLead(caution: Pick<Caution, 'code' | 'level'>, catalogue?: Catalogue): string {
	const words = catalogue ?? britishEnglish;
	return words.cautions[caution.code] ?? words.cautionLevels[caution.level];
}
