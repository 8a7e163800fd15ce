export function RegisterPage() { return <main id="main" className="page" tabIndex={-1}><h1>register</h1></main>; }
