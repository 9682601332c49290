import type { Params } from './params';
import type { World } from './world';

/** One request to the API: its parameters, and the ids in its path. */
export type Call = { world: World; params: Params; ids: string[] };

/** Reads the parameters, calls `params.done()`, then changes the world and gives the answer. */
export type Handler = (call: Call) => object;

/** Method and path, with `:id` for an id. */
export type Routes = { [route: `${'GET' | 'POST' | 'DELETE'} /v1/${string}`]: Handler };
