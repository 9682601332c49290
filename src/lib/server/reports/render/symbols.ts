/** Symbols of inputs and outputs within a line: italic letters, upright words below. Only what methods use. */
import { textRuns, type Run, type RunStyle } from './runs';

const greek: Record<string, string> = {
	alpha: 'α',
	beta: 'β',
	gamma: 'γ',
	delta: 'δ',
	epsilon: 'ε',
	varepsilon: 'ε',
	theta: 'θ',
	lambda: 'λ',
	mu: 'μ',
	nu: 'ν',
	rho: 'ρ',
	sigma: 'σ',
	tau: 'τ',
	phi: 'φ',
	varphi: 'φ',
	omega: 'ω',
	Gamma: 'Γ',
	Delta: 'Δ',
	Theta: 'Θ',
	Phi: 'Φ',
	Omega: 'Ω'
};

interface Atom {
	text: string;
	upright: boolean;
}

/** A letter, a Greek letter or upright words; undefined for anything richer. */
function atom(tex: string): Atom | undefined {
	const over = /^\\overline\{(.+)\}$/.exec(tex);
	if (over?.[1]) {
		const inner = atom(over[1]);
		return inner ? { ...inner, text: `${inner.text}\u0305` } : undefined;
	}
	const words = /^\\(?:mathrm|text)\{([A-Za-z0-9 ,/-]+)\}$/.exec(tex);
	if (words?.[1]) return { text: words[1], upright: true };
	const letter = /^\\([A-Za-z]+)$/.exec(tex)?.[1];
	if (letter) return greek[letter] ? { text: greek[letter], upright: false } : undefined;
	return /^[A-Za-z]$/.test(tex)
		? { text: tex, upright: false }
		: /^\d+$/.test(tex)
			? { text: tex, upright: true }
			: undefined;
}

/**
 * Runs of a symbol such as `T_\mathrm{n}` or `\varepsilon`; an empty list where it is richer than a line can show,
 * so that the name alone stands there.
 */
export function symbolRuns(tex: string, style: RunStyle = {}): Run[] {
	const match =
		/^((?:\\overline\{.+?\})|(?:\\?[A-Za-z]+(?:\{[^}]*\})?))(?:_(\{.+\}|\\mathrm\{[^}]*\}|\\?[A-Za-z0-9]+))?$/.exec(
			tex.trim()
		);
	if (!match) return [];
	const base = atom(match[1] ?? '');
	if (!base) return [];
	const runs = textRuns(base.text, { ...style, italics: !base.upright });
	if (match[2] === undefined) return runs;
	const inner = match[2].startsWith('{') ? match[2].slice(1, -1) : match[2];
	const below = atom(inner);
	if (!below) return [];
	return [...runs, ...textRuns(below.text, { ...style, italics: !below.upright, sub: true })];
}
