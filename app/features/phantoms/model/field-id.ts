/** The element id of the field at a path of the request. */
export const fieldId = (path: string): string => `f-${path.replaceAll('.', '-')}`;
