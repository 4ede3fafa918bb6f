import { seedDemo } from './seed/seed-demo.ts';

const ownerUrl = process.env['MIGRATE_DATABASE_URL'];
const appUrl = process.env['DATABASE_URL'];
if (!ownerUrl || !appUrl) throw new Error('MIGRATE_DATABASE_URL and DATABASE_URL are needed.');

const today = new Date();
today.setHours(0, 0, 0, 0);
await seedDemo({ ownerUrl, appUrl, today });
