import { workedExample } from '$lib/server/example/worked-example';
import { methodLines } from '$lib/server/methods/describe';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async () => ({ example: await workedExample(), methods: methodLines() });
