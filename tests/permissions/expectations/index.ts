import type { Entry } from '../entry';
import { accountEntries } from './accounts';
import { billingEntries } from './billing';
import { calculationEntries } from './calculations';
import { dossierEntries } from './dossiers';
import { organisationEntries } from './organisation';
import { publicEntries } from './public';
import { reportEntries } from './reports';
import { reviewEntries } from './reviews';
import { sharingEntries } from './sharing';

/** What each thing that can be asked of the service answers to whom; one entry for each, one file an area. */
export const entries: readonly Entry[] = [
	...publicEntries,
	...accountEntries,
	...organisationEntries,
	...dossierEntries,
	...calculationEntries,
	...reportEntries,
	...reviewEntries,
	...sharingEntries,
	...billingEntries
];
