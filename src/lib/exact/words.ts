/** The two 32-bit halves of a double, read and written through shared memory. */
const double = new Float64Array(1);
const words = new Uint32Array(double.buffer);
double[0] = 1;
const highIndex = words[1] === 0x3ff00000 ? 1 : 0;

export function highWord(x: number): number {
	double[0] = x;
	return words[highIndex] as number;
}

export function withHighWord(x: number, high: number): number {
	double[0] = x;
	words[highIndex] = high;
	return double[0] as number;
}
