import { z } from 'zod';
import { licences } from '../../../../shared/contracts/common';
import { frameUploadResponseSchema } from '../../../../shared/contracts/arrays';
import { familyKeySchema, familyKeys, type FamilyKey } from '../../../../shared/domain/families';
import { dataKinds, noiseReferences } from '../../../../shared/domain/phantom-definition';
import {
  deblurringDraftSchema, eitDraftSchema, emptyDeblurring, emptyEit, emptyEquation, emptyTruth, emptyXray, equationDraftSchema, truthDraftKeys, truthDraftSchema, xrayDraftSchema, type TruthDraft,
} from './form-drafts';

const text = z.string();

/** The form as it is typed. Every family keeps its own geometry and, while another is open, its own ground truth. */
export const phantomFormSchema = z.object({
  group: text, name: text, description: text, licence: z.union([z.literal(''), z.enum(licences)]), whatChanged: text,
  family: familyKeySchema,
  ...truthDraftSchema.shape,
  parked: z.partialRecord(z.enum(familyKeys), truthDraftSchema),
  eit: eitDraftSchema, xray: xrayDraftSchema, equation: equationDraftSchema, deblurring: deblurringDraftSchema,
  dataKind: z.enum(dataKinds), noiseReference: z.enum(noiseReferences),
  framesOrigin: z.enum(['none', 'tank', 'living']), frames: frameUploadResponseSchema.nullable(), instrument: text,
  ethicsReference: text, ethicsApproved: z.boolean(), deidentified: z.boolean(), currentWithinStandard: z.boolean(),
  sealed: z.boolean(), sealedUntil: text,
});
export type PhantomForm = z.infer<typeof phantomFormSchema>;

const dataOf = (family: FamilyKey): Pick<PhantomForm, 'dataKind' | 'noiseReference'> =>
  family === 'electrical-impedance' ? { dataKind: 'difference', noiseReference: 'voltages' } : { dataKind: 'absolute', noiseReference: 'data' };

export function emptyForm(group = '', family: FamilyKey = 'electrical-impedance'): PhantomForm {
  return {
    group, name: '', description: '', licence: '', whatChanged: '',
    family, ...emptyTruth(family), parked: {},
    eit: emptyEit, xray: emptyXray, equation: emptyEquation, deblurring: emptyDeblurring,
    ...dataOf(family),
    framesOrigin: 'none', frames: null, instrument: '', ethicsReference: '', ethicsApproved: false, deidentified: false, currentWithinStandard: false,
    sealed: false, sealedUntil: '',
  };
}

/** The ground truth in the form. */
export const truthOf = (form: PhantomForm): TruthDraft => Object.fromEntries(truthDraftKeys.map((key) => [key, form[key]])) as TruthDraft;

/** Another family: its own ground truth comes back, the one of the old family is kept. Measured frames belong to the old geometry. */
export function changeFamily(form: PhantomForm, family: FamilyKey): Partial<PhantomForm> {
  if (family === form.family) return {};
  return { family, ...(form.parked[family] ?? emptyTruth(family)), parked: { ...form.parked, [form.family]: truthOf(form) }, ...dataOf(family), frames: null, framesOrigin: 'none' };
}

const storageKey = (key: string): string => `hadamark.phantom-form.${key}`;

/** Unsent input outlives an error, a reload and a sign-in. */
export function storeForm(key: string, form: PhantomForm): void {
  try {
    window.sessionStorage.setItem(storageKey(key), JSON.stringify(form));
  } catch {
    // Storage may be full or switched off; the form then lives as long as the page.
  }
}
export function storedForm(key: string): PhantomForm | null {
  try {
    const raw = window.sessionStorage.getItem(storageKey(key));
    if (!raw) return null;
    const parsed = phantomFormSchema.safeParse(JSON.parse(raw));
    return parsed.success ? parsed.data : null;
  } catch {
    return null;
  }
}
export function forgetForm(key: string): void {
  try {
    window.sessionStorage.removeItem(storageKey(key));
  } catch {
    // Nothing is stored where storage is switched off.
  }
}
