import { ENDPOINTS } from '#shared/api/endpoints';
import { storedFile, type StoredFile, type UploadFields } from '#shared/api/files';
import { searchOf } from '../call.js';
import { noConnection, refusalFrom } from '../refusal.js';

export type UploadEndpoint = 'uploadCapture' | 'uploadSnapshot' | 'uploadGlossary' | 'uploadAttachment';
export interface Upload { endpoint: UploadEndpoint; file: File; fields: UploadFields; onProgress: (sentBytes: number, totalBytes: number) => void }
export interface RunningUpload { done: Promise<StoredFile>; cancel: () => void }

function formOf(file: File): FormData {
  const form = new FormData();
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
    // What the file is for stands in the address: the server decides on it before it takes a byte.
    request.open('POST', ENDPOINTS[given.endpoint].path + searchOf(given.fields));
    request.setRequestHeader('accept', 'application/json');
    request.setRequestHeader('x-crosstie', '1');
    request.send(formOf(given.file));
  });
  return { done, cancel: () => request.abort() };
}

function parsed(text: string): unknown {
  try { return JSON.parse(text); } catch { return undefined; }
}
