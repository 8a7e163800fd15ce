import Markdown, { type Components } from 'react-markdown';
import remarkGfm from 'remark-gfm';

const OWN_FILE = /^\/api\/files\/[0-9a-f-]{36}\/content$/;

/** Pictures only from the issue's own files: a remote one would tell its host who reads what. */
const parts: Components = {
  img: ({ src, alt }) => (typeof src === 'string' && OWN_FILE.test(src) ? <img src={src} alt={alt ?? ''} loading="lazy" /> : <span className="soft">[picture left out: {alt || 'no description'}]</span>),
  a: ({ href, children }) => <a href={href} rel="noreferrer noopener nofollow" target={href?.startsWith('/') ? undefined : '_blank'}>{children}</a>,
  h1: ({ children }) => <h3>{children}</h3>,
  h2: ({ children }) => <h3>{children}</h3>,
  table: ({ children }) => <div className="scroller" tabIndex={0} role="group" aria-label="Table"><table className="data">{children}</table></div>,
};

/** Markdown as people write it; HTML in it stays text. */
export function Prose({ children }: { children: string }) {
  return <div className="prose"><Markdown remarkPlugins={[remarkGfm]} components={parts}>{children}</Markdown></div>;
}
