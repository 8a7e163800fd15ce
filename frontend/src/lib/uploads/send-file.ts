import { ENDPOINTS } from '#shared/api/endpoints';
import { storedFile, type StoredFile, type UploadFields } from '#shared/api/files';
import { noConnection, refusalFrom } from '../refusal.js';

export type UploadEndpoint = 'uploadCapture' | 'uploadSnapshot' | 'uploadGlossary' | 'uploadAttachment';
export interface Upload { endpoint: UploadEndpoint; file: File; fields: UploadFields; onProgress: (sentBytes: number, totalBytes: number) => void }
export interface RunningUpload { done: Promise<StoredFile>; cancel: () => void }

/** The fields go first: the server checks access and quota before it takes a byte of the file. */
function formOf({ file, fields }: Upload): FormData {
  const form = new FormData();
  for (const [name, value] of Object.entries(fields)) if (value !== undefined) form.append(name, String(value));
  form.append('file', file, file.name);
  return form;
}

/** Sends one file; XMLHttpRequest, since fetch cannot tell how many bytes have gone. */
export function sendFile(given: Upload): RunningUpload {
  const request = new XMLHttpRequest();
  const done = new Promise<StoredFile>((resolve, reject) => {
    request.upload.addEventListener('progress', (e) => given.onProgress(e.loaded, e.total));
    request.addEventListener('error', () => reject(noConnection()));
    request.addEventListener('abort', () => reject(new DOMException('cancelled', 'AbortError')));
    request.addEventListener('load', () => {
      const body = parsed(request.responseText);
      if (request.status >= 200 && request.status < 300) resolve(storedFile.parse(body));
      else reject(refusalFrom(request.status, body));
    });
    request.open('POST', ENDPOINTS[given.endpoint].path);
    request.setRequestHeader('accept', 'application/json');
    request.setRequestHeader('x-crosstie', '1');
    request.send(formOf(given));
  });
  return { done, cancel: () => request.abort() };
}

function parsed(text: string): unknown {
  try { return JSON.parse(text); } catch { return undefined; }
}
