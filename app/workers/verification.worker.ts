import { getVerificationCheck } from '../../solvers/verification/registry';
import type { VerificationRequest, VerificationResponse } from './verification-messages';

const send = (response: VerificationResponse): void => self.postMessage(response);

self.onmessage = ({ data: { id, key } }: MessageEvent<VerificationRequest>) => {
  send({ id, state: 'begun' });
  try {
    const begin = performance.now();
    const { measured, gap, digest } = getVerificationCheck(key).run();
    send({ id, state: 'done', outcome: { measured, gap, digest, seconds: (performance.now() - begin) / 1000 } });
  } catch (cause) {
    send({ id, state: 'failed', message: cause instanceof Error ? cause.message : String(cause) });
  }
};
