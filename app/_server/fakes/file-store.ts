import { createHash } from 'node:crypto';
import {
  createReadStream,
  existsSync,
  mkdirSync,
  readFileSync,
  renameSync,
  statSync,
  unlinkSync,
  writeFileSync,
} from 'node:fs';
import path from 'node:path';

/** What the fake knows of a file; kept beside the bytes, so that it survives a restart. */
export interface StoredFile {
  readonly key: string;
  readonly name: string;
  readonly size: number;
  readonly type: string;
  readonly customId: string | null;
  readonly slug: string | null;
  /** What the product registered before the upload; null for uploads by the server itself. */
  readonly route: {
    readonly metadata: unknown;
    readonly callbackUrl: string;
    readonly callbackSlug: string;
  } | null;
  /** Answer to the browser once all is done; null while bytes are missing. */
  readonly answer: unknown;
  readonly uploadedAt: number | null;
}

/** Files and their notes in one folder. Keys are checked, because they become names of files. */
export class FileStore {
  constructor(private readonly folder: string) {
    mkdirSync(folder, { recursive: true });
  }

  static isKey(key: string): boolean {
    return /^[A-Za-z0-9_-]{20,200}$/.test(key);
  }

  bytesPath(key: string): string {
    return path.join(this.folder, `${key}.bin`);
  }

  find(key: string): StoredFile | null {
    const note = path.join(this.folder, `${key}.json`);
    return existsSync(note) ? (JSON.parse(readFileSync(note, 'utf8')) as StoredFile) : null;
  }

  save(file: StoredFile): void {
    const note = path.join(this.folder, `${file.key}.json`);
    writeFileSync(`${note}.new`, JSON.stringify(file));
    renameSync(`${note}.new`, note);
  }

  /** Bytes that have arrived. */
  stored(key: string): number {
    return existsSync(this.bytesPath(key)) ? statSync(this.bytesPath(key)).size : 0;
  }

  read(key: string) {
    return createReadStream(this.bytesPath(key));
  }

  remove(key: string): boolean {
    if (!this.find(key)) return false;
    this.removeBytes(key);
    unlinkSync(path.join(this.folder, `${key}.json`));
    return true;
  }

  /** Forgets what has arrived; what the product registered stays, so that the upload can begin again. */
  removeBytes(key: string): void {
    if (existsSync(this.bytesPath(key))) unlinkSync(this.bytesPath(key));
  }

  md5(key: string): Promise<string> {
    return new Promise((resolve, reject) => {
      const hash = createHash('md5');
      this.read(key)
        .on('data', (chunk) => hash.update(chunk))
        .on('end', () => resolve(hash.digest('hex')))
        .on('error', reject);
    });
  }
}
