// The one door to the library `odex`. It ships untyped JavaScript beside TypeScript of laxer rules than ours; `odex.d.ts` types it.
export { Solver } from 'odex';
