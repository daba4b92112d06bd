import { parentPort } from 'node:worker_threads';
import { goldenHashes } from './golden-set';

parentPort?.postMessage([...goldenHashes()]);
