import { can, type Actor, type Subject } from '../../../shared/domain/permissions.ts';
import type { Phantom, PhantomVersion } from '../../entities/phantom.ts';

/** Facts of one version for the permission table. A withdrawn version stays readable when it was published before. */
export function versionSubject(phantom: Pick<Phantom, 'group'>, version: Pick<PhantomVersion, 'state' | 'publishedAt'>): Subject {
  return {
    groupId: phantom.group.id,
    published: version.publishedAt !== null && version.publishedAt !== undefined,
    submitted: version.state === 'submitted' || version.state === 'changes-requested',
  };
}

export const mayReadVersion = (actor: Actor | null, phantom: Pick<Phantom, 'group'>, version: Pick<PhantomVersion, 'state' | 'publishedAt'>): boolean =>
  can(actor, 'content.read', versionSubject(phantom, version));

/** Sealed until the day begins (UTC). The clock opens it: nothing has to run on that day. */
export const isSealed = (version: Pick<PhantomVersion, 'sealedUntil'>, now: Date): boolean =>
  version.sealedUntil !== null && version.sealedUntil !== undefined && now.toISOString().slice(0, 10) < version.sealedUntil;

/** Whether the reader may see the ground truth of a version they may read. */
export const maySeeTruth = (actor: Actor | null, phantom: Pick<Phantom, 'group'>, version: Pick<PhantomVersion, 'sealedUntil'>, now: Date): boolean =>
  !isSealed(version, now) || can(actor, 'phantom.read-sealed', { groupId: phantom.group.id });
