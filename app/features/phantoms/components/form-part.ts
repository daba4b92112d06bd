import type { PhantomForm } from '../model/phantom-form';

/** Fields to set, or what makes them from the form as it is when the change is applied. */
export type FormPatch = Partial<PhantomForm> | ((form: PhantomForm) => Partial<PhantomForm>);

/** What every part of the phantom form is given. */
export interface FormPart {
  readonly form: PhantomForm;
  readonly change: (patch: FormPatch) => void;
  /** The fault to show at a field, by the path of the request. */
  readonly issueAt: (path: string) => string | undefined;
}
