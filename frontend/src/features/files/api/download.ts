/** Where a file's bytes are; the server sends them as an attachment. */
export const downloadAddress = (fileId: string): string => `/api/files/${fileId}/content`;
