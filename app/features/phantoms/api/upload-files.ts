import { useMutation } from '@tanstack/react-query';
import { arrayUploadResponseSchema, frameUploadResponseSchema } from '../../../../shared/contracts/arrays';
import { api } from '../../../lib/api-client';

function formData(file: File, fields: Record<string, string> = {}): FormData {
  const body = new FormData();
  for (const [key, value] of Object.entries(fields)) body.append(key, value);
  body.append('file', file);
  return body;
}
export const useUploadArray = () => useMutation({ mutationFn: (file: File) => api.post('/arrays', arrayUploadResponseSchema, { body: formData(file) }) });
export const useUploadFrames = () =>
  useMutation({
    mutationFn: ({ file, valuesPerFrame }: { file: File; valuesPerFrame: number }) =>
      api.post('/frames', frameUploadResponseSchema, { body: formData(file, { valuesPerFrame: String(valuesPerFrame) }) }),
  });
