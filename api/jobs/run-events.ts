import { EventEmitter } from 'node:events';

export interface RunEvents {
  /** Something about the run changed: read its row. */
  readonly changed: (runId: string) => void;
  /** Returns what ends the listening. */
  readonly listen: (runId: string, listener: () => void) => () => void;
}

/** Tells readers in this process that a run moved. What it moved to is in the database: a late reader misses nothing. */
export function makeRunEvents(): RunEvents {
  const emitter = new EventEmitter();
  // Every open run page is a listener.
  emitter.setMaxListeners(0);
  return {
    changed: (runId) => void emitter.emit(runId),
    listen: (runId, listener) => {
      emitter.on(runId, listener);
      return () => emitter.off(runId, listener);
    },
  };
}
