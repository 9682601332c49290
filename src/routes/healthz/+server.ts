import { json } from '@sveltejs/kit';

/** The process is alive. Says nothing about what it depends on; `/readyz` does. */
export const GET = () => json({ alive: true }, { headers: { 'cache-control': 'no-store' } });
