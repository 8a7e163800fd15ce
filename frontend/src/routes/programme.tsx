export function ProgrammePage() { return <main id="main" className="page" tabIndex={-1}><h1>programme</h1></main>; }
