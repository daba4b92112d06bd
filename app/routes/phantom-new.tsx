import '../styles/pages/phantom-new.css';
import { useState } from 'react';
import { useNavigate, useSearchParams } from 'react-router-dom';
import { Page } from '../components/layout/page';
import { useNoise } from '../components/noise-rule/use-noise';
import { ButtonLink } from '../components/ui/button';
import { PageHead } from '../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { useToast } from '../components/ui/toast';
import { usePhantom } from '../features/phantoms/api/get-phantom';
import { PhantomEditor } from '../features/phantoms/components/phantom-editor';
import { formFromVersion } from '../features/phantoms/model/form-from-version';
import { emptyForm } from '../features/phantoms/model/phantom-form';
import type { FormMode } from '../features/phantoms/model/form-request';
import { useSession } from '../features/session/api/session';
import { paths } from '../lib/paths';
import type { PhantomDetail } from '../../shared/contracts/phantoms';

/** A new phantom; `?draft=slug&v=n` edits a draft, `?from=slug` makes the next version of a phantom. */
export default function PhantomNewRoute() {
  const [params] = useSearchParams();
  const draft = params.get('draft');
  const from = params.get('from');
  const slug = draft ?? from;
  const session = useSession();
  if (session.isPending) return <Shell><Loading label="Fetching your roles" /></Shell>;
  if (!session.account) {
    return (
      <Shell>
        <PageHead title="New phantom" />
        <Empty title="Sign in to make a phantom">Curators and owners of a group make phantoms. <ButtonLink to={paths.signIn(`${paths.phantomNew()}?${params.toString()}`)} style={{ marginTop: 10 }}>Sign in</ButtonLink></Empty>
      </Shell>
    );
  }
  const groups = session.account.groups.filter((g) => session.can('phantom.create', { groupId: g.id }));
  if (!slug && groups.length === 0) {
    return (
      <Shell>
        <PageHead title="New phantom" />
        <Empty title="None of your groups lets you make phantoms">A curator or an owner can. Ask the owner of your group, or <a href={paths.groups()}>create a group</a>.</Empty>
      </Shell>
    );
  }
  const common = { groups, handle: session.account.handle };
  if (slug) return <Existing key={slug} slug={slug} n={Number(params.get('v')) || undefined} mode={draft ? 'edit' : 'next'} {...common} />;
  return <Editor mode="new" phantom={null} {...common} />;
}

interface Common {
  groups: readonly { slug: string; name: string }[];
  handle: string;
}

function Existing({ slug, n, mode, ...common }: Common & { slug: string; n: number | undefined; mode: FormMode }) {
  const phantom = usePhantom(slug, n);
  if (phantom.isPending) return <Shell><Loading label="Fetching the phantom" disc /></Shell>;
  if (phantom.isError) return <Shell><PageHead title="Edit a phantom" /><ErrorPanel error={phantom.error} onRetry={() => void phantom.refetch()} /></Shell>;
  const { may } = phantom.data;
  if (mode === 'edit' ? !may.edit : !may.newVersion) {
    return (
      <Shell>
        <PageHead title={phantom.data.name} />
        <Empty title={mode === 'edit' ? 'This version is not a draft' : 'You cannot add a version here'}>
          {mode === 'edit' ? 'A version never changes once it is submitted; a correction is a new version.' : 'A curator or an owner of its group can.'} <ButtonLink to={paths.phantom(slug)}>Open the phantom</ButtonLink>
        </Empty>
      </Shell>
    );
  }
  return <Editor mode={mode} phantom={phantom.data} {...common} />;
}

function Editor({ mode, phantom, groups, handle }: Common & { mode: FormMode; phantom: PhantomDetail | null }) {
  const { noise } = useNoise();
  const navigate = useNavigate();
  const toast = useToast();
  const [now] = useState(() => new Date());
  const [initial] = useState(() => (phantom ? formFromVersion(phantom.group.slug, phantom.version) : emptyForm(groups[0]?.slug ?? '')));
  const key = phantom ? `${mode}.${phantom.slug}.${phantom.version.n}` : 'new';
  const known = phantom && !groups.some((g) => g.slug === phantom.group.slug) ? [...groups, phantom.group] : groups;
  return (
    <PhantomEditor
      frame={(floor, content) => <Shell floor={floor}>{content}</Shell>}
      mode={mode} phantom={phantom} storageKey={key} initial={initial} groups={known} handle={handle} noise={noise} now={now}
        onStored={(detail, submitted) => {
          toast(submitted ? `Version ${detail.version.n} submitted for review.` : `Draft of version ${detail.version.n} kept.`);
          void navigate(paths.phantomVersion(detail.slug, detail.version.n));
        }}
      />
  );
}

function Shell({ floor = null, children }: { floor?: number | null; children: React.ReactNode }) {
  return <Page title="New phantom" rule={{ floor }} className="page-phantom-new">{children}</Page>;
}
