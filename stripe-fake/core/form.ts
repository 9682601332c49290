/** A decoded form: text, or fields by name. Arrays come as fields named 0, 1, 2 …, or `[]` in the order of writing. */
export type FormNode = string | { [name: string]: FormNode };
export type FormTree = { [name: string]: FormNode };

/* Names are taken from requests: an object without prototype has none of its own. */
const emptyTree = (): FormTree => Object.create(null) as FormTree;

/** @returns the parts of `a[b][0]` as a, b, 0; an empty bracket stays empty */
function partsOf(name: string): string[] {
	const head = /^[^[]*/.exec(name)?.[0] ?? '';
	return [head, ...[...name.slice(head.length).matchAll(/\[([^\]]*)\]/g)].map(([, part = '']) => part)];
}

/** Decodes `application/x-www-form-urlencoded` with bracketed names, of a body or of a query. */
export function decodeForm(text: string): FormTree {
	const root = emptyTree();
	for (const [name, value] of new URLSearchParams(text)) {
		const parts = partsOf(name);
		let node = root;
		parts.forEach((given, depth) => {
			const part = given === '' && depth > 0 ? String(Object.keys(node).length) : given;
			if (depth === parts.length - 1) {
				node[part] = value;
				return;
			}
			const next = node[part];
			if (typeof next === 'object') node = next;
			else node = node[part] = emptyTree();
		});
	}
	return root;
}
