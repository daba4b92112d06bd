/** Computes the set in a worker of any engine and posts it back. */
import { goldenHashes } from './golden-set';

declare const self: { postMessage(message: unknown): void };
self.postMessage([...goldenHashes()]);
