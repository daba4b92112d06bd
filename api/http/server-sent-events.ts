import type { Request, Response } from 'express';

export interface EventStream {
  /** `id` comes back as Last-Event-ID when the browser reconnects. */
  readonly send: (event: string, data: unknown, id?: string) => void;
  readonly close: () => void;
  /** Sent by a browser that reconnects. */
  readonly lastEventId: string | undefined;
  readonly onClose: (callback: () => void) => void;
}

const heartbeatMs = 15_000;
/** Told to the browser: how long it waits before it reconnects. */
const retryMs = 2_000;
const openStreams = new Set<() => void>();

/** Ends every open stream, so that a server can stop without waiting for its readers. */
export function closeEventStreams(): void {
  for (const close of [...openStreams]) close();
}

export function openEventStream(req: Request, res: Response): EventStream {
  res.status(200).set({
    'Content-Type': 'text/event-stream; charset=utf-8',
    'Cache-Control': 'no-store',
    Connection: 'keep-alive',
    // Proxies that buffer would hold progress back.
    'X-Accel-Buffering': 'no',
  });
  res.flushHeaders();
  res.write(`retry: ${retryMs}\n\n`);
  const callbacks: (() => void)[] = [];
  let open = true;
  const heartbeat = setInterval(() => res.write(': still here\n\n'), heartbeatMs);
  heartbeat.unref();
  const close = (): void => {
    if (!open) return;
    open = false;
    clearInterval(heartbeat);
    openStreams.delete(close);
    res.end();
    for (const callback of callbacks) callback();
  };
  openStreams.add(close);
  res.on('close', close);
  res.on('error', close);
  return {
    send: (event, data, id) => {
      if (!open) return;
      // JSON has no raw line breaks, so one data line holds it.
      res.write(`${id === undefined ? '' : `id: ${id}\n`}event: ${event}\ndata: ${JSON.stringify(data)}\n\n`);
    },
    close,
    lastEventId: req.get('last-event-id'),
    onClose: (callback) => {
      if (open) callbacks.push(callback);
      else callback();
    },
  };
}
