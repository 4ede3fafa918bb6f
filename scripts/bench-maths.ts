import { benchBecome } from './bench/bench-become.ts';
import { benchRepair } from './bench/bench-repair.ts';
import { benchWeights } from './bench/bench-weights.ts';

console.log(`What it can become, repair, scale weights: seeded, each time the least of three, Node ${process.version}`);
await benchBecome();
await benchRepair();
benchWeights();
