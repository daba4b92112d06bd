import type { licences } from '../../../../shared/contracts/common';

export const licenceNames: Record<(typeof licences)[number], { name: string; line: string }> = {
  'CC0-1.0': { name: 'Public domain (CC0 1.0)', line: 'Public domain, no conditions' },
  'CC-BY-4.0': { name: 'Attribution (CC BY 4.0)', line: 'Attribution licence, commercial use allowed' },
  'CC-BY-SA-4.0': { name: 'Attribution, share alike (CC BY-SA 4.0)', line: 'Attribution licence, adaptations under the same terms' },
  'ODbL-1.0': { name: 'Open database (ODbL 1.0)', line: 'Open database licence, attribution and share alike' },
};
