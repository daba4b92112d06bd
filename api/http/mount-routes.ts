import { pipeline } from 'node:stream/promises';
import { Readable } from 'node:stream';
import type { Request, RequestHandler, Response, Router } from 'express';
import type { Dependencies } from '../dependencies.ts';
import type { LimitName, Reply, Route } from './define-route.ts';
import { openEventStream } from './server-sent-events.ts';
import { endSession } from './session.ts';
import { readUpload } from './uploads.ts';

/** Turns route definitions into Express routes. */
export function mountRoutes(
  router: Router,
  routes: readonly Route[],
  deps: Dependencies,
  limiters: Readonly<Record<LimitName, RequestHandler>>,
): void {
  for (const route of routes) {
    const handlers: RequestHandler[] = [];
    if (route.limit) handlers.push(limiters[route.limit]);
    handlers.push(async (req, res) => {
      const reply = await route.execute({
        em: deps.orm.em.fork(),
        deps,
        actor: req.actor ?? null,
        session: { end: () => endSession(req, res) },
        requestId: String(req.id),
        origin: deps.env.publicUrl ?? `${req.protocol}://${req.host}`,
        params: req.params,
        query: req.query,
        body: req.body,
        readUpload: (spec) => readUpload(req, res, spec),
      });
      await sendReply(req, res, reply);
    });
    router[route.method](route.path, ...handlers);
  }
}

async function sendReply(req: Request, res: Response, reply: Reply): Promise<void> {
  switch (reply.kind) {
    case 'empty':
      res.status(204).end();
      return;
    case 'json':
      if (reply.location !== undefined) res.location(reply.location);
      if (reply.etag !== undefined) setEtag(res, reply.etag);
      // res.json answers 304 by itself when the tag matches a GET.
      res.status(reply.status).json(reply.body);
      return;
    case 'file': {
      res.status(200).type(reply.contentType);
      if (reply.fileName !== undefined) res.attachment(reply.fileName).type(reply.contentType);
      if (reply.etag !== undefined) setEtag(res, reply.etag);
      if (reply.body instanceof Readable) {
        if (req.fresh) {
          reply.body.destroy();
          res.status(304).end();
        } else await pipeline(reply.body, res);
      } else if (typeof reply.body === 'string') res.send(reply.body);
      else res.send(Buffer.from(reply.body.buffer, reply.body.byteOffset, reply.body.byteLength));
      return;
    }
    case 'events': {
      const stream = openEventStream(req, res);
      const stop = reply.start(stream);
      if (stop) stream.onClose(stop);
    }
  }
}

function setEtag(res: Response, tag: string): void {
  // The reader keeps it and asks again: whether they may still read it is decided on every request.
  res.set({ ETag: `"${tag}"`, 'Cache-Control': 'private, no-cache' });
}
