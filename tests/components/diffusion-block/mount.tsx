import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { act, useState } from 'react';
import { createRoot, type Root } from 'react-dom/client';
import { vi } from 'vitest';
import { BlocksProvider, blocksKey } from '@/components/diffusion-block/blocks-context';
import { DiffusionBlockView } from '@/components/diffusion-block/diffusion-block';
import type { BlockAnswer } from '@/db/inputs/block-answer';
import type { BlockAttributes } from '@/db/inputs/block-settings';
import { ENTRY } from './some-results';

/** A block on a page of its own, with a server that answers what the test says and a document that takes what is written. */
export interface Mounted {
  readonly element: HTMLElement;
  /** What the view wrote into the document, one change after the other. */
  readonly written: Partial<BlockAttributes>[];
  readonly removed: () => number;
  /** The document changed from afar. */
  fromAfar(change: Partial<BlockAttributes>): Promise<void>;
  /** The server has something new, and the page is told. */
  answer(next: BlockAnswer | Error): Promise<void>;
  text(): string;
  status(): string | undefined;
  control(label: string): HTMLInputElement;
  button(name: string): HTMLButtonElement;
  type(label: string, words: string): Promise<void>;
  leave(label: string): Promise<void>;
  press(label: string, key: string): Promise<void>;
  click(name: string): Promise<void>;
  choose(label: string, value: string): Promise<void>;
  unmount(): Promise<void>;
}

export async function mount(
  attributes: BlockAttributes,
  first: BlockAnswer | Error,
  given: { editable?: boolean; faulty?: (keyof BlockAttributes)[]; timeZone?: string } = {},
): Promise<Mounted> {
  vi.stubGlobal('IS_REACT_ACT_ENVIRONMENT', true);
  let server = first;
  vi.stubGlobal('fetch', () =>
    server instanceof Error
      ? Promise.reject(server)
      : Promise.resolve(
          new Response(JSON.stringify(server), { headers: { 'Content-Type': 'application/json' } }),
        ),
  );
  const client = new QueryClient({ defaultOptions: { queries: { retry: false } } });
  const written: Partial<BlockAttributes>[] = [];
  let removed = 0;
  let change: (part: Partial<BlockAttributes>) => void = () => undefined;

  function Page() {
    const [now, setNow] = useState(attributes);
    change = (part) => setNow((before) => ({ ...before, ...part }));
    return (
      <DiffusionBlockView
        attributes={now}
        faulty={given.faulty ?? []}
        selected={false}
        editable={given.editable ?? true}
        remove={() => (removed += 1)}
        update={(part) => {
          written.push(part);
          change(part);
        }}
      />
    );
  }

  const element = document.createElement('div');
  document.body.append(element);
  const root: Root = createRoot(element);
  /** Lets answers arrive and be drawn. */
  const settle = () => act(async () => void (await new Promise((resolve) => setTimeout(resolve, 5))));
  await act(async () =>
    root.render(
      <QueryClientProvider client={client}>
        <BlocksProvider entryId={ENTRY} timeZone={given.timeZone ?? null}>
          <Page />
        </BlocksProvider>
      </QueryClientProvider>,
    ),
  );
  await settle();

  const control = (label: string) => {
    const found = [...element.querySelectorAll('label')].find((one) => one.textContent === label);
    const named = element.querySelector<HTMLInputElement>(`[aria-label="${label}"]`);
    const input = found ? element.querySelector<HTMLInputElement>(`[id="${found.htmlFor}"]`) : named;
    if (!input) throw new Error(`no control "${label}"`);
    return input;
  };
  const button = (name: string) => {
    const found = [...element.querySelectorAll('button')].find((one) =>
      (one.getAttribute('aria-label') ?? one.textContent)?.includes(name),
    );
    if (!found) throw new Error(`no button "${name}"`);
    return found;
  };
  const fill = (input: HTMLInputElement, value: string) => {
    const prototype = Object.getPrototypeOf(input) as object;
    // React watches the property of the prototype; setting it on the element itself would pass by it.
    Object.getOwnPropertyDescriptor(prototype, 'value')?.set?.call(input, value);
    const event = input.tagName === 'SELECT' ? 'change' : 'input';
    input.dispatchEvent(new Event(event, { bubbles: true }));
  };
  const on = (label: string, run: (input: HTMLInputElement) => void) => act(async () => run(control(label)));

  return {
    element,
    written,
    removed: () => removed,
    fromAfar: (part) => act(async () => change(part)),
    async answer(next) {
      server = next;
      await act(() => client.invalidateQueries({ queryKey: blocksKey(ENTRY) }));
      await settle();
    },
    text: () => (element.textContent ?? '').replaceAll(/[\u2009\u202f]/g, ' '),
    status: () => element.querySelector<HTMLElement>('[data-block-status]')?.dataset.blockStatus,
    control,
    button,
    type: (label, words) =>
      on(label, (input) => {
        input.focus();
        fill(input, words);
      }),
    leave: (label) => on(label, (input) => input.blur()),
    press: (label, key) =>
      on(label, (input) => input.dispatchEvent(new KeyboardEvent('keydown', { key, bubbles: true }))),
    click: (name) => act(async () => button(name).click()),
    choose: (label, value) => on(label, (input) => fill(input, value)),
    async unmount() {
      await act(async () => root.unmount());
      client.clear();
      element.remove();
      vi.unstubAllGlobals();
    },
  };
}
