import type { GroupPlan, PhantomPlan } from './demo-plan.ts';

const published = (reason: string, by = 'reviewer-demo') => ({ published: { by, reason } });

export const groups: readonly GroupPlan[] = [
  {
    slug: 'tarn-soil-physics', name: 'Tarn Soil Physics', owner: 'owner-demo',
    description: 'Water in soil columns, seen by electrodes around them. Keeps the impedance phantoms with 16 and 24 electrodes.',
    members: [{ handle: 'curator-demo', roles: ['curator'] }, { handle: 'observer-demo', roles: ['observer'] }],
  },
  {
    slug: 'holm-reference-methods', name: 'Holm Reference Methods', owner: 'owner-demo',
    description: 'Plain implementations of published methods, with the parameters their sources recommend, for others to be compared with.',
    members: [{ handle: 'developer-demo', roles: ['developer'] }],
  },
  {
    slug: 'northlight-process-imaging', name: 'Northlight Process Imaging', owner: 'developer-demo',
    description: 'Sharp interfaces in pipes and mixers.',
    members: [{ handle: 'observer-demo', roles: ['observer'] }],
  },
  {
    slug: 'quarry-point-geophysics', name: 'Quarry Point Geophysics', owner: 'curator-demo',
    description: 'Nonlinear inversion, and the phantoms with 32 electrodes.',
    members: [{ handle: 'developer-demo', roles: ['developer'] }, { handle: 'second-reviewer-demo', roles: ['observer'] }],
  },
  {
    slug: 'lantern-bay-tomography', name: 'Lantern Bay Tomography', owner: 'curator-demo',
    description: 'Few views, few angles, little dose. Keeps the X-ray phantoms.',
    members: [{ handle: 'observer-demo', roles: ['observer'] }],
  },
  {
    slug: 'ember-lane-optics', name: 'Ember Lane Optics', owner: 'owner-demo',
    description: 'Instruments that smear what they look at. Keeps the integral equations and the blurred pictures.',
    members: [{ handle: 'curator-demo', roles: ['curator'] }, { handle: 'developer-demo', roles: ['developer'] }],
  },
];

const soil = (folder: string, reason: string, by?: string): PhantomPlan => ({ folder, group: 'tarn-soil-physics', curator: 'curator-demo', ...published(reason, by) });
const quarry = (folder: string, reason: string): PhantomPlan => ({ folder, group: 'quarry-point-geophysics', curator: 'curator-demo', ...published(reason) });
const xray = (folder: string, reason: string, by?: string): PhantomPlan => ({ folder, group: 'lantern-bay-tomography', curator: 'curator-demo', ...published(reason, by) });
const optics = (folder: string, reason: string, by?: string): PhantomPlan => ({ folder, group: 'ember-lane-optics', curator: 'curator-demo', ...published(reason, by) });
const second = 'second-reviewer-demo';

export const phantoms: readonly PhantomPlan[] = [
  soil('two-lobes', 'Checks pass, the description says what the two signs are for.'),
  soil('deep-core', 'The formula in the description agrees with its source. Checks pass.'),
  { ...soil('rim-pair-and-bar', 'Looked at the truth under seal: shapes lie inside the disc, checks pass.'), sealedForDays: 180 },
  soil('warm-and-cold-spots', 'The expression is smooth and close to the background at the rim. Checks pass.', second),
  soil('crescent-and-hook', 'Extent and grey scale are stated, the array is oriented as the description says.', second),
  quarry('four-compass-points', 'North is up and first electrode at the top. Noise is relative to the voltages, and the page says so.'),
  quarry('ring-with-a-core', 'The ring is no target, as intended. Checks pass.'),
  quarry('wedge-and-bump', 'Corner and bump lie clear of the electrodes. Checks pass.'),
  soil('kidney-with-two-seeds', 'The outline is the one of the formula, and the seeds lie clear of it. Checks pass.'),
  soil('uneven-belt', 'Angles and contacts in the table are those of the description. Checks pass.', second),
  { folder: 'split-bar', group: 'tarn-soil-physics', curator: 'curator-demo' },
  xray('shepp-logan', 'Positions, axes and densities compared with the table that the description names; line integrals are the closed form.'),
  xray('shepp-logan-raised-contrast', 'The same ellipses as the original head, densities as stated. Checks pass.'),
  xray('slabs-over-a-third-of-a-turn', 'The missing third is stated, and so is which edges it hides. Checks pass.', second),
  xray('cased-core-in-a-fan', 'Source, detector and magnification agree with each other. Checks pass.', second),
  xray('soft-hills-few-views', 'The hills are smooth to their feet. Checks pass.'),
  optics('two-lights-behind-a-slit', 'The kernel and the solution are those of the source. Checks pass.'),
  optics('bump-behind-a-window', 'The right-hand side is the closed form of the source. Checks pass.'),
  optics('half-wave-under-an-exponential', 'Kernel, right-hand side and solution agree with the source. Checks pass.'),
  optics('straight-line-under-a-root', 'Kernel, right-hand side and solution agree with the source. Checks pass.', second),
  optics('uneven-seam', 'The depth is stated, and the checks pass.'),
  optics('rising-load-on-a-string', 'The kernel is that of the second derivative with fixed ends. Checks pass.', second),
  optics('warm-spell-at-the-surface', 'The description warns that the end of the record is hardly determined. Checks pass.'),
  optics('lamps-in-the-dark', 'Nothing shines near the frame, so that the zero edge is true. Checks pass.'),
  optics('pans-out-of-focus', 'The light from beyond the frame is in the data, and the page says so. Checks pass.', second),
  optics('signs-in-passing', 'The ground repeats at the frame, as the inversion assumes. Checks pass.'),
];
