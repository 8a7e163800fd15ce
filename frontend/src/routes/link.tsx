export function LinkPage() { return <main id="main" className="page" tabIndex={-1}><h1>link</h1></main>; }
