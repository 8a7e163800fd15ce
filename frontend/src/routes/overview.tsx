export function OverviewPage() { return <main id="main" className="page" tabIndex={-1}><h1>overview</h1></main>; }
