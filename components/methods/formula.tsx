import 'server-only';
import katex from 'katex';

/**
 * A formula set by KaTeX on the server: the page needs no script for it, and its fonts ship with the product. MathML for
 * those who listen stands in it too.
 */
export function Formula({ tex, display = false }: { tex: string; display?: boolean }) {
  const html = katex.renderToString(tex, {
    displayMode: display,
    throwOnError: true,
    trust: false,
    strict: 'error',
  });
  const Tag = display ? 'div' : 'span';
  // The text is the product's own, and KaTeX writes every sign of it as text.
  return (
    <Tag
      className={display ? 'my-4 max-w-measure overflow-x-auto py-1' : undefined}
      dangerouslySetInnerHTML={{ __html: html }}
    />
  );
}
