/** Largest file that may be uploaded, bytes; read whole in memory, so kept equal to what intake reads. */
export const MAX_UPLOAD_BYTES = 20 * 1024 * 1024;
/** The same in the words of the upload SDK. */
export const MAX_UPLOAD_SIZE = '32MB' as const;
