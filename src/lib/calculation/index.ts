export { compute, computeInBlocks, computeNow, type ComputeOptions } from './compute';
export { ProblemError, type Problem } from './problem';
