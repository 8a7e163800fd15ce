import { createBrowserRouter, Navigate, type RouteObject } from 'react-router-dom';
import { ErrorPage } from './error-page.js';
import { Gate } from './gate.js';
import { Missing } from './missing.js';
import { LoadingPage } from '../components/ui/loading.js';

type Page = () => React.JSX.Element;
/** A page loaded when it is first opened. */
const page = (path: string, load: () => Promise<Page>): RouteObject => ({
  path, errorElement: <ErrorPage />, lazy: async () => ({ Component: await load() }),
});

export const router = createBrowserRouter([
  {
    element: <Gate />,
    errorElement: <ErrorPage />,
    HydrateFallback: LoadingPage,
    children: [
      page('/', async () => (await import('../routes/day-sheet.js')).DaySheetPage),
      page('/register', async () => (await import('../routes/register.js')).RegisterPage),
      page('/issues/new', async () => (await import('../routes/file-issue.js')).FileIssuePage),
      page('/issues/:programme/:number', async () => (await import('../routes/issue.js')).IssuePage),
      page('/links', async () => (await import('../routes/links.js')).LinksPage),
      page('/links/:linkId', async () => (await import('../routes/link.js')).LinkPage),
      page('/overview', async () => (await import('../routes/overview.js')).OverviewPage),
      page('/programme', async () => (await import('../routes/programme.js')).ProgrammePage),
      page('/account', async () => (await import('../routes/account.js')).AccountPage),
      { path: '/sign-in', element: <Navigate to="/" replace /> },
      { path: '*', element: <Missing /> },
    ],
  },
]);
