import { createHash } from 'node:crypto';
import { type Random, seededRandom } from '#scripts/seed/random.ts';
import { START } from '#tests/support/station.ts';
import type { SimulatedDatabase } from './simulated-database.ts';
import { serverAtRest, simulatedServer } from './simulated-server.ts';
import { type SimulatedShop, makeSimulatedShop } from './simulated-shop.ts';
import { SimulatedStation } from './simulated-station.ts';
import { brokenInShown } from './shown-invariant.ts';
import { anyEntry, freshOn, mixOn, wasToldUnsaved } from './technician.ts';
import { EVERY_FAULT, type FaultCount, type Faults, type Handlers, NO_FAULT, noneYet } from './virtual-network.ts';
import { VirtualTime } from './virtual-time.ts';

export interface Settings {
  stations: number;
  operations: number;
  /** Bends what the handlers do: the mutation check breaks them on purpose. */
  bend?: (server: Handlers) => Handlers;
}

export interface Simulated {
  shop: SimulatedShop;
  stations: readonly SimulatedStation[];
  /** Each operation that a station said was saved, and which station it was. */
  saved: ReadonlyMap<string, SimulatedStation>;
  /** Entries that a device said it could not keep. */
  unsaved: number;
  kills: number;
  faults: FaultCount;
  /** Sentences of what did not hold while it ran. */
  broken: readonly string[];
  /** SHA-256 of everything that happened, and when: the same for the same seed. */
  trace: string;
}

const SECOND = 1000;
const SHIFT_MS = 600 * SECOND;
/** A stalled exchange is given up after a minute, so none begins in the last one. */
const LAST_STALL_MS = 61 * SECOND;
/** After the faults have stopped everything must have been sent by then (invariant 7) … */
export const SENT_WITHIN_MS = 60 * SECOND;
/** … and everybody has fetched once more. */
const FETCHED_AFTER_MS = 40 * SECOND;

/** A shift of one seed: it is the same every time. */
export async function simulate(database: SimulatedDatabase, seed: number, settings: Settings): Promise<Simulated> {
  const run = new Shift(database, await makeSimulatedShop(database.db, seed, settings.stations), seed, settings);
  return run.work();
}

class Shift {
  private readonly random: Random;
  private readonly time: VirtualTime;
  private readonly stations: SimulatedStation[];
  private readonly saved = new Map<string, SimulatedStation>();
  private readonly happened = createHash('sha256');
  private readonly broken: string[] = [];
  private readonly hot: string[] = [];
  private readonly count = noneYet();
  private faults: Faults = NO_FAULT;
  private kills = 0;
  private unsaved = 0;

  constructor(
    database: SimulatedDatabase,
    private readonly shop: SimulatedShop,
    seed: number,
    private readonly settings: Settings,
  ) {
    this.random = seededRandom(seed);
    this.time = new VirtualTime(START.getTime(), database.waitsForLock);
    const bend = settings.bend ?? ((server: Handlers) => server);
    this.stations = shop.enrolled.map((enrolled, n) => {
      const handlers = this.watched(bend(simulatedServer(shop, enrolled, this.time)));
      const { time, count } = this;
      const server = serverAtRest(shop, enrolled, time);
      const faults = () => this.faults;
      return new SimulatedStation({ time, shop, enrolled, handlers, server, seed, count, faults, name: String(n) });
    });
  }

  async work(): Promise<Simulated> {
    for (const station of this.stations) await station.signIn();
    await this.pass(20 * SECOND);
    await this.makeHotTubs();
    await this.pass(60 * SECOND);
    this.faults = EVERY_FAULT;
    this.planShift();
    await this.pass(SHIFT_MS - LAST_STALL_MS);
    this.faults = { ...EVERY_FAULT, stalled: 0 };
    await this.pass(LAST_STALL_MS);
    await this.endFaults();
    await this.pass(SENT_WITHIN_MS);
    await this.requireAllSent();
    await this.pass(FETCHED_AFTER_MS);
    for (const station of this.stations) station.stop();
    // What is under way comes to its end.
    await this.pass(20 * SECOND);
    const { shop, stations, saved, unsaved, kills, broken, count: faults } = this;
    return { shop, stations, saved, unsaved, kills, faults, broken, trace: this.happened.digest('hex') };
  }

  private pass(ms: number): Promise<void> {
    return this.time.runUntil(this.time.now() + ms);
  }

  private async makeHotTubs(): Promise<void> {
    for (const station of this.stations.slice(0, 2)) {
      const mixed = await mixOn(station, freshOn(station, 900));
      const { opId } = await station.record(mixed);
      this.saved.set(opId, station);
      this.hot.push(mixed.body.filled[0]?.bucketId ?? '');
    }
  }

  private planShift(): void {
    const { random, settings, stations } = this;
    const often = (share: number) => Math.ceil(settings.operations * share);
    for (let n = 0; n < settings.operations; n++) this.plan('entry', n, (one) => this.enter(one));
    for (let n = 0; n < often(0.08); n++) this.plan('shown', n, (one) => this.look(one));
    for (let n = 0; n < often(0.04); n++) this.plan('kill', n, (one) => this.kill(one));
    for (let n = 0; n < often(0.03); n++) this.plan('dead zone', n, (one) => this.goOffline(one));
    for (let n = 0; n < often(0.02); n++) this.plan('clock', n, (one) => this.turnClock(one));
    for (let n = 0; n < often(0.01); n++) this.plan('disk', n, (one) => this.fillDisk(one));
    if (stations.length === 0 || random.next() > 1) throw new Error('A shift needs stations.');
  }

  /** Somewhere in the shift, on one of the stations. */
  private plan(what: string, n: number, run: (station: SimulatedStation) => Promise<void> | void): void {
    const station = this.random.pick(this.stations);
    this.time.after(this.random.next() * (SHIFT_MS - 5 * SECOND), `${what}${n}`, () => {
      this.note(what, station.name);
      return run(station);
    });
  }

  private async enter(station: SimulatedStation): Promise<void> {
    if (station.open === undefined) return;
    try {
      const body = await anyEntry(station, this.hot, this.random);
      if (body === undefined) return;
      const { opId } = await station.record(body);
      this.saved.set(opId, station);
      this.note('saved', opId);
    } catch (error) {
      if (!wasToldUnsaved(error)) throw error;
      this.unsaved += 1;
    }
  }

  private async look(station: SimulatedStation): Promise<void> {
    if (station.open !== undefined) this.broken.push(...(await brokenInShown(this.shop, station, this.saved)));
  }

  private kill(station: SimulatedStation): void {
    if (station.open === undefined) return;
    this.kills += 1;
    station.killTab();
    this.later(station, this.random.int(100, 5000), () => station.startAgain());
  }

  private goOffline(station: SimulatedStation): void {
    station.setOnline(false);
    this.later(station, this.random.int(5, 90) * SECOND, () => station.setOnline(true));
  }

  /** Off by an hour, by a year, or set back. */
  private turnClock(station: SimulatedStation): void {
    station.skewMs = this.random.pick([3_600_000, 365 * 86_400_000, -3_600_000, -365 * 86_400_000, 0]);
  }

  private fillDisk(station: SimulatedStation): void {
    station.disk.setFull(true);
    this.later(station, this.random.int(5, 40) * SECOND, () => station.disk.setFull(false));
  }

  private later(station: SimulatedStation, ms: number, run: () => Promise<void> | void): void {
    this.time.after(ms, `later:${station.name}:${this.random.next()}`, run);
  }

  private async endFaults(): Promise<void> {
    this.faults = NO_FAULT;
    for (const station of this.stations) {
      station.skewMs = 0;
      station.disk.setFull(false);
      this.later(station, 1, async () => {
        await station.startAgain();
        station.setOnline(true);
      });
    }
  }

  /** (7) All that was saved has been sent a minute after the faults stopped. */
  private async requireAllSent(): Promise<void> {
    for (const station of this.stations) {
      const waiting = await station.requireTab().open.outbox.ops.where('status').equals('waiting').count();
      if (waiting > 0) this.broken.push(`in time: station ${station.name} still has ${waiting} entries to send`);
    }
  }

  private watched(handlers: Handlers): Handlers {
    return async (request) => {
      this.note('arrived', request.order);
      const response = await handlers(request);
      this.note('answered', `${request.order} ${response.status}`);
      return response;
    };
  }

  private note(what: string, which: string): void {
    this.happened.update(`${this.time.now()} ${what} ${which}\n`);
  }
}
