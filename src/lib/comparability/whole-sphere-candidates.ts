import { toSi } from '../quantities/convert';
import { parseUnit } from '../quantities/parse-unit';
import { claimOf, type RuleContext } from './context';

export interface WholeSphereMean {
	/** What it is called in a sentence. */
	name: string;
	/** K */
	temperature: number;
	input?: string;
	output?: string;
}

/** Every temperature in play that is said to be the mean over the whole body: claimed, observed or computed. */
export function wholeSphereMeans(context: RuleContext): WholeSphereMean[] {
	const means: WholeSphereMean[] = [];
	const { setting } = context.checked.model;
	const compared = claimOf(context);
	if (compared?.claim.area === 'whole-sphere' && compared.output.quantity === 'temperature') {
		const { claim, output } = compared;
		const unit = parseUnit(claim.unit ?? output.unit);
		const kind = claim.temperatureKind;
		if (unit !== undefined && (kind === undefined || kind === 'skin' || kind === 'not-stated')) {
			means.push({ name: 'The stated mean', temperature: toSi(claim.value, unit) });
		}
	}
	const observed = setting.values.observedTemperature;
	if (
		observed !== undefined &&
		setting.options.observedArea === 'whole-sphere' &&
		setting.options.observedKind === 'skin'
	) {
		means.push({ name: 'The observed mean', temperature: observed, input: 'observedTemperature' });
	}
	const computed = context.propagated.values.wholeSphereMeanTemperature;
	if (computed !== undefined) {
		means.push({
			name: 'The mean over the whole body',
			temperature: computed,
			output: 'wholeSphereMeanTemperature'
		});
	}
	return means;
}

/** Absorbed and internal flux over the whole body in W m^-2, and emissivity; undefined for a method without them. */
export function wholeSphereFlux({ checked }: RuleContext): { flux: number; emissivity: number } | undefined {
	const { irradiance, bondAlbedo, emissivity, internalFlux } = checked.model.setting.values;
	if (irradiance === undefined || bondAlbedo === undefined || emissivity === undefined) return undefined;
	return { flux: (irradiance * (1 - bondAlbedo)) / 4 + (internalFlux ?? 0), emissivity };
}
