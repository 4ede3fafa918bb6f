export interface ImportRow {
  /** The file the import stands in. */
  file: string;
  /** What the linter says about a forbidden import. */
  message: string;
  allowed: readonly string[];
  forbidden: readonly string[];
}

const upward = '../contract/operation.ts';
const browser = ['react', 'react-dom/client', 'dexie', 'dexie-react-hooks'];
const server = ['kysely', 'pg', 'pino', '@node-rs/argon2', 'node:fs'];
const station = [
  '#offline/station.ts',
  '#components/ui/Top.tsx',
  '#pages/api/sync/push.ts',
  '#service-worker/strategy.ts',
];
const office = [
  '#server/db/connection.ts',
  '#pages/api/sync/push.ts',
  '#layouts/StationLayout.astro',
  '#middleware.ts',
];

/** "Who may import whom" of DEVELOPERS.md, one row a folder. */
export const importTable: readonly ImportRow[] = [
  {
    file: 'src/domain/probe.ts',
    message: 'domain imports only its own files, fraction.js, @konfirm/iso7064 and culori/fn.',
    allowed: ['./mass.ts', 'fraction.js', '@konfirm/iso7064', 'culori/fn'],
    forbidden: ['zod/mini', 'vitest', '#contract/rows.ts', ...station, ...office, ...browser, ...server],
  },
  {
    file: 'src/domain/probe.test.ts',
    message: 'domain imports only its own files, fraction.js, @konfirm/iso7064 and culori/fn.',
    allowed: ['./mass.ts', 'fraction.js', 'vitest', 'fast-check'],
    forbidden: ['zod/mini', '#contract/rows.ts', ...station, ...server],
  },
  {
    file: 'src/contract/probe.ts',
    message: 'contract imports only domain and zod/mini.',
    allowed: ['./rows.ts', '#domain/mass.ts', 'zod/mini'],
    forbidden: ['zod', 'fraction.js', 'vitest', ...station, ...office, ...browser, ...server],
  },
  {
    file: 'src/offline/probe.ts',
    message: 'offline imports only contract, domain and what its local stores need.',
    allowed: ['./station.ts', '#contract/rows.ts', '#domain/mass.ts', 'dexie', 'jose', 'zod/mini', 'uuid'],
    forbidden: ['react', 'zod', 'vitest', '#components/ui/Top.tsx', '#workers/solver.ts', ...office, ...server],
  },
  {
    file: 'src/workers/probe.ts',
    message: 'workers import only domain and contract.',
    allowed: ['./solver.ts', '#domain/mass.ts', '#contract/rows.ts'],
    forbidden: ['zod/mini', ...station, ...office, ...browser, ...server],
  },
  {
    file: 'src/service-worker/probe.ts',
    message: 'service-worker imports only workbox and its own files.',
    allowed: ['./strategy.ts', 'workbox-core', 'workbox-precaching', 'workbox-routing'],
    forbidden: [
      'zod/mini',
      '#contract/rows.ts',
      '#domain/mass.ts',
      '#offline/station.ts',
      ...office,
      ...browser,
      ...server,
    ],
  },
  {
    file: 'src/server/probe.ts',
    message: 'server imports contract and domain, and nothing of the browser.',
    allowed: ['./env.ts', '#server/db/connection.ts', '#contract/rows.ts', '#domain/mass.ts', 'jose', 'zod', ...server],
    forbidden: [
      ...station,
      '#workers/solver.ts',
      '#layouts/StationLayout.astro',
      '#middleware.ts',
      'workbox-core',
      ...browser,
    ],
  },
  {
    file: 'src/components/weigh/probe.tsx',
    message: 'components import offline, contract, domain, workers and components/ui, and nothing of the server.',
    allowed: [
      './Reading.tsx',
      '#components/ui/Top.tsx',
      '#offline/station.ts',
      '#contract/rows.ts',
      '#domain/mass.ts',
      '#workers/solver.ts',
      'react',
    ],
    forbidden: ['#components/mix/MixPage.tsx', '#service-worker/strategy.ts', 'astro:env/server', ...office, ...server],
  },
  {
    file: 'src/layouts/probe.astro',
    message: 'layouts import only components, styles and fonts.',
    allowed: [
      './StationLayout.astro',
      '#components/ui/Top.tsx',
      '#styles/app.css',
      '@fontsource/roboto-condensed/latin-400.css',
    ],
    forbidden: [
      '#server/env.ts',
      '#offline/station.ts',
      '#contract/rows.ts',
      '#domain/mass.ts',
      '#service-worker/strategy.ts',
      'dexie',
      ...server,
    ],
  },
  {
    file: 'src/pages/api/probe.ts',
    message: 'pages and middleware never import the service worker.',
    allowed: [
      '#server/env.ts',
      '#contract/rows.ts',
      '#components/ui/Top.tsx',
      '#layouts/StationLayout.astro',
      '#offline/station.ts',
    ],
    forbidden: ['#service-worker/strategy.ts', 'workbox-core', 'workbox-precaching'],
  },
  {
    file: 'src/pages/probe.astro',
    message: 'pages and middleware never import the service worker.',
    allowed: ['#server/env.ts', '#components/ui/Top.tsx', '#layouts/StationLayout.astro'],
    forbidden: ['#service-worker/strategy.ts', 'workbox-core'],
  },
  {
    file: 'src/middleware.ts',
    message: 'pages and middleware never import the service worker.',
    allowed: ['#server/env.ts', '#contract/rows.ts', 'astro:middleware'],
    forbidden: ['#service-worker/strategy.ts', 'workbox-core'],
  },
  {
    file: 'migrations/0099-probe.ts',
    message: 'migrations import kysely only.',
    allowed: ['kysely'],
    forbidden: ['pg', '#server/env.ts', '#domain/mass.ts', '#contract/rows.ts'],
  },
  ...[
    'src/domain/probe.ts',
    'src/contract/probe.ts',
    'src/offline/probe.ts',
    'src/workers/probe.ts',
    'src/service-worker/probe.ts',
    'src/server/probe.ts',
    'src/components/weigh/probe.tsx',
    'src/layouts/probe.astro',
    'src/pages/api/probe.ts',
    'tests/server/probe.test.ts',
    'scripts/probe.ts',
  ].map((file) => ({
    file,
    message: 'Imports across folders use #folder/file.ts, never ../.',
    allowed: ['./beside.ts'],
    forbidden: [upward, '../../src/domain/mass.ts'],
  })),
];
