export { canonicalText } from './canonical-text.ts';
export type { Json } from './canonical-text.ts';
export { entryHash, START_OF_CHAIN } from './entry-hash.ts';
export { sha256 } from './sha256.ts';
export { verifyChain } from './verify-chain.ts';
export type { ChainEntry, ChainFault, ChainVerdict, PrintedHead } from './verify-chain.ts';
