export function FileIssuePage() { return <main id="main" className="page" tabIndex={-1}><h1>file-issue</h1></main>; }
