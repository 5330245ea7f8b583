/**
 * A demo person at work: signs in, uploads and confirms readings through the same addresses as a browser, so that what
 * the demo shows was really received, measured and read by the running product.
 */
export class DemoVisitor {
  private readonly cookies = new Map<string, string>();

  private constructor(private readonly origin: string) {}

  /** @throws Error when the product refuses the name and password. */
  static async signIn(origin: string, name: string, password: string): Promise<DemoVisitor> {
    const visitor = new DemoVisitor(origin);
    const { csrfToken } = (await visitor.json('/api/auth/csrf')) as { csrfToken: string };
    const form = new URLSearchParams({ csrfToken, name, password, json: 'true' });
    await visitor.send('/api/auth/callback/credentials', { method: 'POST', body: form });
    return visitor;
  }

  async signOut(): Promise<void> {
    const { csrfToken } = (await this.json('/api/auth/csrf')) as { csrfToken: string };
    await this.send('/api/auth/signout', {
      method: 'POST',
      body: new URLSearchParams({ csrfToken, json: 'true' }),
    });
  }

  async json(path: string, body?: unknown): Promise<unknown> {
    const response = await this.send(
      path,
      body === undefined
        ? {}
        : { method: 'POST', body: JSON.stringify(body), headers: { 'Content-Type': 'application/json' } },
    );
    return response.json();
  }

  /**
   * Uploads one file to an entry: asks the product for a place, sends the bytes to the file service, and gets back what
   * the product's own server stored.
   */
  async upload(entryId: string, name: string, text: string): Promise<{ attachmentId: string }> {
    const bytes = Buffer.from(text, 'utf8');
    const places = (await this.json('/api/uploadthing?actionType=upload&slug=trajectory', {
      input: { entryId },
      files: [{ name, size: bytes.length, type: 'text/csv', lastModified: 0 }],
    })) as { url: string }[];
    const place = places[0];
    if (!place) throw new Error(`no place to upload ${name} to`);
    const form = new FormData();
    form.append('file', new Blob([bytes], { type: 'text/csv' }), name);
    const response = await fetch(place.url, { method: 'PUT', body: form, headers: { Range: 'bytes=0-' } });
    if (!response.ok) throw new Error(`upload of ${name}: ${response.status} ${await response.text()}`);
    const { serverData } = (await response.json()) as { serverData: { attachmentId: string } };
    return serverData;
  }

  private async send(path: string, init: RequestInit): Promise<Response> {
    const response = await fetch(this.origin + path, {
      ...init,
      redirect: 'manual',
      headers: {
        ...(init.headers as Record<string, string> | undefined),
        Origin: this.origin,
        Cookie: [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; '),
      },
    });
    for (const cookie of response.headers.getSetCookie()) {
      const [pair = ''] = cookie.split(';');
      const at = pair.indexOf('=');
      this.cookies.set(pair.slice(0, at), pair.slice(at + 1));
    }
    if (response.status >= 400) throw new Error(`${path}: ${response.status} ${await response.text()}`);
    return response;
  }
}
