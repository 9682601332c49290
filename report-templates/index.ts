/// <reference types="vite/client" />
import type { Template } from './template';

/** Every folder that holds a `layout.ts` is a template; adding one touches nothing else. */
const modules = import.meta.glob<{ template: Template }>('./*/layout.ts', { eager: true });

export const templates: readonly Template[] = Object.values(modules)
	.map((module) => module.template)
	.sort((a, b) => a.id.localeCompare(b.id, 'en'));

/** A template by its id. */
export function templateById(id: string): Template | undefined {
	return templates.find((template) => template.id === id);
}
