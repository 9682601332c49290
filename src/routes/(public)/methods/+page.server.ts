import { methodLines } from '$lib/server/methods/describe';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = () => ({ methods: methodLines() });
