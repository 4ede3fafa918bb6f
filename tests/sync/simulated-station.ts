import { recordOperation } from '#offline/record-operation.ts';
import { type Browser, type Station, openStation, saveSignIn } from '#offline/station.ts';
import type { Surroundings } from '#offline/surroundings.ts';
import { type SyncHandle, startSync } from '#offline/sync-loop.ts';
import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Operation } from '#contract/operation.ts';
import { type Random, seededRandom } from '#scripts/seed/random.ts';
import { makeSignIn, memoryStorage } from '#tests/support/station.ts';
import { diskOf } from './simulated-disk.ts';
import { seededIds } from './simulated-ids.ts';
import type { Enrolled, SimulatedShop } from './simulated-shop.ts';
import { type FaultCount, type Faults, type Handlers, virtualFetch } from './virtual-network.ts';
import type { VirtualTime } from './virtual-time.ts';

interface Given {
  time: VirtualTime;
  shop: SimulatedShop;
  enrolled: Enrolled;
  /** Held up and bent: what the network reaches. */
  handlers: Handlers;
  /** As it is, for questions when the shift is over. */
  server: Handlers;
  faults: () => Faults;
  count: FaultCount;
  seed: number;
  name: string;
}

/** One device: the real client code on a disk and a clock of its own; its tab can be killed, its disk fill up. */
export class SimulatedStation {
  online = true;
  /** What its clock is ahead of the true time, ms. */
  skewMs = 0;
  readonly disk: ReturnType<typeof diskOf>;
  private tab: { open: Station; sync: SyncHandle; deps: { now: () => Date; randomId: () => string } } | undefined;
  private tabs = 0;
  private timers = 0;
  private wakers = new Set<() => void>();
  private readonly browser: Browser = { storage: memoryStorage(), now: () => this.now() };

  constructor(readonly given: Given) {
    this.disk = diskOf(given.enrolled.installId);
  }

  get name(): string {
    return this.given.name;
  }

  /** The open tab; undefined between a kill and the next start. */
  get open(): Station | undefined {
    return this.tab?.open;
  }

  async signIn(): Promise<void> {
    const { shop, enrolled } = this.given;
    const ids = { shopId: shop.shopId, personId: shop.personId, installId: enrolled.installId };
    const claims = { jti: enrolled.grantId, station: enrolled.stationId };
    const response = await makeSignIn({ ...ids, grant: { claims } });
    response.station.id = enrolled.stationId;
    response.install.codePrefix = enrolled.codePrefix;
    this.begin(await saveSignIn(response, this.browser));
  }

  /** Everything in memory is gone, requests under way with it; what is on the disk stays. */
  killTab(): void {
    if (this.tab === undefined) return;
    this.stop();
    this.tab.open.cache.close();
    this.tab.open.outbox.close();
    this.tab = undefined;
  }

  async startAgain(): Promise<void> {
    if (this.tab !== undefined) return;
    const open = await openStation(this.browser);
    if (open === undefined) throw new Error(`${this.name} could not be opened again.`);
    this.begin(open);
  }

  record(body: OperationBody): Promise<Operation> {
    const { open, deps } = this.requireTab();
    return recordOperation(open, body, deps);
  }

  setOnline(online: boolean): void {
    this.online = online;
    if (online) for (const wake of this.wakers) wake();
  }

  /** No more timers and triggers. */
  stop(): void {
    this.tab?.sync.stop();
  }

  async forget(): Promise<void> {
    const { open } = this.requireTab();
    await open.cache.delete();
    await open.outbox.delete();
  }

  requireTab() {
    if (this.tab === undefined) throw new Error(`${this.name} has no open tab.`);
    return this.tab;
  }

  private now(): Date {
    return new Date(this.given.time.now() + this.skewMs);
  }

  private begin(open: Station): void {
    const { time, handlers, faults, count, seed } = this.given;
    const name = `${this.name}.${++this.tabs}`;
    const random = seededRandom(Math.imul(seed, 7919) + Number(this.name) * 104_729 + this.tabs * 1_299_709);
    const fetch = virtualFetch(handlers, { time, random, name, faults, count, isOnline: () => this.online });
    const randomId = seededIds(seededRandom(random.int(0, 2 ** 31)), time.now);
    const deps = { fetch, now: () => this.now(), randomId };
    this.tab = { open, deps, sync: startSync(open, deps, this.surroundings(name, random)) };
  }

  private surroundings(name: string, random: Random): Surroundings {
    const { time } = this.given;
    let busy = false;
    return {
      isOnline: () => this.online,
      onWake: (run) => {
        this.wakers.add(run);
        return () => this.wakers.delete(run);
      },
      alone: async (_, run) => {
        if (busy) return undefined;
        busy = true;
        time.resume();
        try {
          return await run();
        } finally {
          busy = false;
          time.rest();
        }
      },
      after: (ms, run) => time.after(ms, `${name}:timer${++this.timers}`, run),
      soon: (run) => void time.after(0, `${name}:soon${++this.timers}`, run),
      jitter: () => random.next(),
    };
  }
}
