import * as z from 'zod';

const privateKey = z.looseObject({
  kty: z.literal('EC'),
  crv: z.literal('P-256'),
  x: z.string(),
  y: z.string(),
  d: z.string(),
  kid: z.string(),
});

const schema = z.object({
  DATABASE_URL: z.string().min(1),
  /** Private keys that sign grants; the first is the current one. */
  GRANT_KEYS: z
    .string()
    .transform((text): unknown => JSON.parse(text))
    .pipe(z.object({ keys: z.array(privateKey).min(1) })),
  PUBLIC_ORIGIN: z.string().optional(),
  /** Whoever names it may read /api/metrics; without it nobody may. */
  METRICS_TOKEN: z.string().min(16).optional(),
});
export type Env = z.infer<typeof schema>;

let read: Env | undefined;

/** The server's settings, read once; the start command has said already what is wrong with them. */
export function env(): Env {
  read ??= schema.parse(process.env);
  return read;
}
