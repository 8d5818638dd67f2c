import type { QueryClient } from '@tanstack/react-query';
import {
  createBrowserRouter,
  redirect,
  type LoaderFunctionArgs,
  type RouteObject,
} from 'react-router-dom';
import { Absent } from '#src/lib/absent.ts';
import { hasStatus } from '#src/lib/api-problem.ts';
import { depositQuery, stagesQuery } from '#src/lib/deposit-queries.ts';
import { setPreferencePerson } from '#src/lib/preferences.ts';
import { instanceQuery, meQuery } from '#src/lib/session.ts';
import { NothingHere, PageError, RouteError } from './route-error.tsx';
import { RoutePending } from './route-pending.tsx';
import { signInAddress } from './safe-return.ts';

async function signedIn(
  queryClient: QueryClient,
  { request }: LoaderFunctionArgs,
): Promise<Response | null> {
  try {
    const me = await queryClient.ensureQueryData(meQuery());
    setPreferencePerson(me.id);
    return null;
  } catch (error) {
    const { pathname, search } = new URL(request.url);
    if (hasStatus(error, 401)) return redirect(signInAddress(`${pathname}${search}`));
    throw error;
  }
}

async function depositInHand(
  queryClient: QueryClient,
  { params }: LoaderFunctionArgs,
): Promise<null> {
  const depositId = Number(params['depositId']);
  if (!Number.isSafeInteger(depositId) || depositId <= 0) throw new Absent();
  // Loaders run side by side: without a session nothing of the deposit is asked for.
  await queryClient.ensureQueryData(meQuery());
  await Promise.all([
    queryClient.ensureQueryData(depositQuery(depositId)),
    queryClient.ensureQueryData(stagesQuery(depositId)),
  ]);
  return null;
}

async function demoOnly(queryClient: QueryClient): Promise<null> {
  const instance = await queryClient.ensureQueryData(instanceQuery());
  if (!instance.isDemoInstance) throw new Absent();
  return null;
}

/** Pages before sign-in. */
const openRoutes = (queryClient: QueryClient): RouteObject[] => [
  {
    path: 'sign-in',
    lazy: async () => ({ Component: (await import('./routes/sign-in.tsx')).SignInPage }),
  },
  {
    path: 'forgotten',
    lazy: async () => ({ Component: (await import('./routes/forgotten.tsx')).ForgottenPage }),
  },
  {
    path: 'reset/:token',
    lazy: async () => ({ Component: (await import('./routes/reset.tsx')).ResetPage }),
  },
  {
    path: 'accept/:token',
    lazy: async () => ({ Component: (await import('./routes/accept.tsx')).AcceptPage }),
  },
  {
    path: 'mailbox',
    loader: () => demoOnly(queryClient),
    lazy: async () => ({ Component: (await import('./routes/mailbox.tsx')).MailboxPage }),
  },
];

/** Pages of one deposit. A stage is listed here once it has a page. */
const depositRoutes: RouteObject[] = [
  {
    index: true,
    lazy: async () => ({ Component: (await import('./routes/overview.tsx')).OverviewPage }),
  },
  {
    path: 'intake',
    lazy: async () => ({ Component: (await import('./routes/intake.tsx')).IntakePage }),
  },
  {
    path: 'intake/:uploadId',
    lazy: async () => ({ Component: (await import('./routes/upload.tsx')).UploadPage }),
  },
  {
    path: 'holes',
    lazy: async () => ({ Component: (await import('./routes/holes.tsx')).HolesPage }),
  },
  {
    path: 'holes/:hole',
    lazy: async () => ({ Component: (await import('./routes/hole.tsx')).HolePage }),
  },
  {
    path: 'suite',
    lazy: async () => ({ Component: (await import('./routes/suite.tsx')).SuitePage }),
  },
  {
    path: 'components',
    lazy: async () => ({ Component: (await import('./routes/components.tsx')).ComponentsPage }),
  },
  {
    path: 'groups',
    lazy: async () => ({ Component: (await import('./routes/groups.tsx')).GroupsPage }),
  },
  {
    path: 'populations',
    lazy: async () => ({ Component: (await import('./routes/populations.tsx')).PopulationsPage }),
  },
  {
    path: 'domains',
    lazy: async () => ({ Component: (await import('./routes/domains.tsx')).DomainsPage }),
  },
  {
    path: 'domains/:domainId',
    lazy: async () => ({ Component: (await import('./routes/domain.tsx')).DomainRoute }),
  },
  {
    path: 'geomet',
    lazy: async () => ({ Component: (await import('./routes/geomet.tsx')).GeometPage }),
  },
  {
    path: 'releases',
    lazy: async () => ({ Component: (await import('./routes/releases.tsx')).ReleasesPage }),
  },
  {
    path: 'record',
    lazy: async () => ({ Component: (await import('./routes/record.tsx')).RecordPage }),
  },
  {
    path: 'members',
    lazy: async () => ({ Component: (await import('./routes/members.tsx')).MembersPage }),
  },
  {
    path: 'settings',
    lazy: async () => ({ Component: (await import('./routes/settings.tsx')).SettingsPage }),
  },
];

const peopleRoutes: RouteObject[] = [
  {
    path: 'deposits',
    lazy: async () => ({ Component: (await import('./routes/deposits.tsx')).DepositsPage }),
  },
  {
    path: 'deposits/new',
    lazy: async () => ({ Component: (await import('./routes/new-deposit.tsx')).NewDepositPage }),
  },
  {
    path: 'account',
    lazy: async () => ({ Component: (await import('./routes/account.tsx')).AccountPage }),
  },
  {
    path: 'admin',
    lazy: async () => ({ Component: (await import('./routes/admin.tsx')).AdminPage }),
  },
];

export const makeRoutes = (queryClient: QueryClient): RouteObject[] => [
  {
    ErrorBoundary: RouteError,
    HydrateFallback: RoutePending,
    children: [
      { index: true, loader: () => redirect('/deposits') },
      ...openRoutes(queryClient),
      {
        loader: (args) => signedIn(queryClient, args),
        lazy: async () => ({ Component: (await import('./shell/signed-in.tsx')).SignedIn }),
        children: [
          {
            lazy: async () => ({ Component: (await import('./shell/plain-shell.tsx')).PlainShell }),
            children: [{ ErrorBoundary: PageError, children: peopleRoutes }],
          },
          {
            path: 'deposits/:depositId',
            loader: (args) => depositInHand(queryClient, args),
            shouldRevalidate: ({ currentParams, nextParams }) =>
              currentParams['depositId'] !== nextParams['depositId'],
            ErrorBoundary: RouteError,
            lazy: async () => ({
              Component: (await import('./shell/deposit-shell.tsx')).DepositShell,
            }),
            children: [
              {
                ErrorBoundary: PageError,
                children: [...depositRoutes, { path: '*', Component: NothingHere }],
              },
            ],
          },
        ],
      },
      { path: '*', Component: NoSuchPage },
    ],
  },
];

function NoSuchPage() {
  return (
    <main id="main" tabIndex={-1} className="px-5 py-6">
      <NothingHere />
    </main>
  );
}

export const makeRouter = (queryClient: QueryClient) =>
  createBrowserRouter(makeRoutes(queryClient));
