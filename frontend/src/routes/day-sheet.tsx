export function DaySheetPage() { return <main id="main" className="page" tabIndex={-1}><h1>day-sheet</h1></main>; }
