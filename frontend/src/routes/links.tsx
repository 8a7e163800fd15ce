export function LinksPage() { return <main id="main" className="page" tabIndex={-1}><h1>links</h1></main>; }
