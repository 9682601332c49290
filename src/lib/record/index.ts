export { canonicalJson } from './canonical';
export { engineVersion } from './engine-version';
export { recompute, type Difference, type Recomputation } from './recompute';
export { recordHash, sealRecord } from './seal';
