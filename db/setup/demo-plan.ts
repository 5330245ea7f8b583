/** One demo entry: who wrote it where and when, its words, and its blocks in between. */
export interface DemoEntry {
  readonly notebook: string;
  readonly author: string;
  /** Days before the demo is filled. */
  readonly daysAgo: number;
  readonly title: string;
  readonly parts: readonly (string | DemoBlock)[];
}

/** A diffusion block with its file, simulated from stated physics, and the settings that it is to have. */
export interface DemoBlock {
  readonly file: { readonly name: string; readonly text: string };
  /** What intake must be told because the file does not say it. */
  readonly stated: {
    readonly frameInterval?: string;
    readonly pixelSize?: string;
    readonly exposureFraction?: string;
  };
  readonly caption: string;
  readonly settings: Readonly<Record<string, number | string>>;
}
