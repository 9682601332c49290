import { describe, expect, it } from 'vitest';
import { computeNow } from '../../src/lib/calculation';

const run = (inputs: Record<string, unknown>) =>
	computeNow({ method: 'sunlit-equilibrium', inputs, evaluation: { propagation: 'none' } }).outputs;

describe('sunlit-equilibrium against printed values', () => {
	it('Moon, equator at noon: within the daytime maxima of 387 to 397 K (Williams et al. 2017, abstract; read)', () => {
		// Irradiance and albedo of NASA's Moon fact sheet (read), emissivity of Hayne et al. 2017 (read second hand).
		const outputs = run({
			irradiance: { value: 1361 },
			bondAlbedo: { value: 0.11 },
			emissivity: { value: 0.95 }
		});
		expect(outputs.subsolarTemperature?.value).toBeGreaterThanOrEqual(386.5);
		expect(outputs.subsolarTemperature?.value).toBeLessThan(397);
	});

	it("the evenly spread temperature of the Moon is the black-body row of NASA's fact sheet (270.4 K; read)", () => {
		const outputs = run({
			irradiance: { value: 1361 },
			bondAlbedo: { value: 0.11 },
			emissivity: { value: 1 }
		});
		expect(Math.abs((outputs.equilibriumTemperature?.value ?? NaN) - 270.4)).toBeLessThanOrEqual(0.1);
	});
});
