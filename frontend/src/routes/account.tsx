export function AccountPage() { return <main id="main" className="page" tabIndex={-1}><h1>account</h1></main>; }
