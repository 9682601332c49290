import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import ts from 'typescript';

/*
 * What can be asked of the service, read from the route tree itself: file names say where, and the exports of each
 * file, found by TypeScript's parser, say what. What cannot be read for certain is an error, never left out.
 */

export interface RouteItem {
	/** As SvelteKit names it: "/(app)/dossiers/[id=uuid]". */
	route: string;
	/** "page", "layout" (its load), "action NAME" or an HTTP method. */
	what: string;
	/** Of a page or layout: it has a load of its own on the server, which can be asked for alone. */
	hasLoad: boolean;
	/** Place of that load in the branch of the page (or of any page below the layout), counted from the root layout. */
	depth: number;
}

const methods = new Set(['GET', 'HEAD', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS', 'fallback']);

/** Exported names of a module with what they are set to. @throws Error where an export is of a form not known here */
function exportsOf(source: ts.SourceFile): Map<string, ts.Expression | undefined> {
	const found = new Map<string, ts.Expression | undefined>();
	const unreadable = (node: ts.Node): never => {
		throw new Error(`${source.fileName}: cannot tell what "${node.getText(source)}" exports.`);
	};
	for (const statement of source.statements) {
		if (ts.isExportDeclaration(statement)) {
			if (statement.isTypeOnly) continue;
			if (statement.exportClause === undefined || !ts.isNamedExports(statement.exportClause))
				unreadable(statement);
			else for (const { name } of statement.exportClause.elements) found.set(name.text, undefined);
		}
		const exported =
			ts.canHaveModifiers(statement) &&
			ts.getModifiers(statement)?.some(({ kind }) => kind === ts.SyntaxKind.ExportKeyword);
		if (!exported) continue;
		if (ts.isFunctionDeclaration(statement) && statement.name !== undefined) {
			found.set(statement.name.text, undefined);
		} else if (ts.isVariableStatement(statement)) {
			for (const { name, initializer } of statement.declarationList.declarations) {
				if (ts.isIdentifier(name)) found.set(name.text, initializer);
				else unreadable(statement);
			}
		} else if (!ts.isInterfaceDeclaration(statement) && !ts.isTypeAliasDeclaration(statement)) {
			unreadable(statement);
		}
	}
	return found;
}

/** Names of the actions in the object that is exported. @throws Error where it is anything but written out */
function actionNames(file: string, given: ts.Expression | undefined): string[] {
	let object = given;
	while (
		object !== undefined &&
		(ts.isSatisfiesExpression(object) || ts.isAsExpression(object) || ts.isParenthesizedExpression(object))
	) {
		object = object.expression;
	}
	if (object === undefined || !ts.isObjectLiteralExpression(object))
		throw new Error(`${file}: write the actions out as one object, so that each can be counted.`);
	return object.properties.map(({ name }) => {
		if (name === undefined || !(ts.isIdentifier(name) || ts.isStringLiteral(name)))
			throw new Error(`${file}: name each action in its place, so that it can be counted.`);
		return name.text;
	});
}

function read(file: string): Map<string, ts.Expression | undefined> {
	return exportsOf(ts.createSourceFile(file, readFileSync(file, 'utf8'), ts.ScriptTarget.Latest, true));
}

function itemsOf(folder: string, route: string, layouts: number): RouteItem[] {
	for (const name of ['+page.ts', '+page.js', '+layout.ts', '+layout.js', '+page.server.js', '+server.js']) {
		if (existsSync(join(folder, name)))
			throw new Error(
				`${join(folder, name)}: the reader of routes does not know such files; teach it first.`
			);
	}
	const items: RouteItem[] = [];
	const layout = join(folder, '+layout.server.ts');
	if (existsSync(layout) && read(layout).has('load'))
		items.push({ route, what: 'layout', hasLoad: true, depth: layouts - 1 });
	const page = join(folder, '+page.server.ts');
	const known = existsSync(page) ? read(page) : new Map<string, ts.Expression | undefined>();
	if (existsSync(page) || existsSync(join(folder, '+page.svelte')))
		items.push({ route, what: 'page', hasLoad: known.has('load'), depth: layouts });
	if (known.has('actions')) {
		for (const name of actionNames(page, known.get('actions')))
			items.push({ route, what: `action ${name}`, hasLoad: false, depth: layouts });
	}
	const server = join(folder, '+server.ts');
	if (existsSync(server)) {
		for (const name of read(server).keys())
			if (methods.has(name)) items.push({ route, what: name, hasLoad: false, depth: layouts });
	}
	return items;
}

/** Everything below a folder of routes. */
export function readRouteTree(folder: string, route = '', layoutsAbove = 0): RouteItem[] {
	const names = readdirSync(folder, { withFileTypes: true });
	const odd = names.find(({ name }) => /^\+(page|layout)@/.test(name));
	if (odd !== undefined)
		throw new Error(
			`${join(folder, odd.name)}: the reader does not know layouts that are left out; teach it first.`
		);
	// SvelteKit puts a root layout of its own where there is none; an error page takes a place among them, too.
	const own = route === '' || names.some(({ name }) => /^\+(layout|error)\./.test(name));
	const layouts = layoutsAbove + (own ? 1 : 0);
	return [
		...itemsOf(folder, route === '' ? '/' : route, layouts),
		...names
			.filter((entry) => entry.isDirectory())
			.map(({ name }) => name)
			.sort()
			.flatMap((name) => readRouteTree(join(folder, name), `${route}/${name}`, layouts))
	];
}

/** Items without an expectation, expectations without an item, and those given twice, in words. */
export function gapsBetween(
	items: readonly Pick<RouteItem, 'route' | 'what'>[],
	entries: readonly { route: string; what: string }[]
): string[] {
	const key = ({ route, what }: { route: string; what: string }) => `${route} ${what}`;
	const there = new Set(items.map(key));
	const expected = new Set<string>();
	const twice = entries.map(key).filter((one) => expected.size === expected.add(one).size);
	return [
		...[...there].filter((one) => !expected.has(one)).map((one) => `no expectation for ${one}`),
		...[...expected].filter((one) => !there.has(one)).map((one) => `no route for the expectation ${one}`),
		...twice.map((one) => `two expectations for ${one}`)
	];
}
