import { v7 as uuidv7 } from 'uuid';
import { describe, expect, test } from 'vitest';
import type { Operation } from '#contract/operation.ts';
import { type OperationBody, type OperationType, operationBodies } from '#contract/operation-bodies.ts';
import type { Milligrams } from '#domain/mass.ts';
import { batchMixed, fresh, relocated, returned } from '#tests/support/operations.ts';
import { START } from '#tests/support/station.ts';
import { keyOf, typedOf } from './entry-field.ts';
import { entryFields } from './entry-fields.ts';
import type { EntryNames } from './make-fields.ts';
import { type Typed, readCorrection } from './read-correction.ts';

const [shelfA, shelfB] = [uuidv7(), uuidv7()];
const none = new Map();
const names: EntryNames = {
  locale: 'en-GB',
  formulas: none,
  buckets: none,
  jobs: none,
  locations: new Map([shelfA, shelfB].map((id, n) => [id, { id, code: `S-${n + 1}` }])),
  containers: none,
  components: none,
  lots: none,
  families: none,
  batches: none,
};

function refused(body: OperationBody): Operation {
  const clock = { offsetMs: 0, uncertaintyMs: 0, lastContact: null };
  const ids = { opId: uuidv7(), installId: uuidv7(), actorId: uuidv7(), grantId: uuidv7() };
  const at = START.toISOString();
  return { ...ids, deviceSeq: 1, opVersion: 1, grantLapsed: false, deviceTime: at, clock, seen: {}, ...body };
}

function correct(body: OperationBody, typed: Typed = {}) {
  const operation = refused(body);
  return readCorrection(operation, entryFields(operation, names), typed);
}

const id = uuidv7();
const mg = (value: number) => value as Milligrams;
const EXAMPLES: { [T in OperationType]: Extract<OperationBody, { type: T }> } = {
  'batch-mixed': batchMixed([fresh(uuidv7(), 400_000), fresh(uuidv7(), 100_005)]),
  'batch-released': {
    type: 'batch-released',
    body: { batchId: id, release: { light: 'D65', byEye: true, at: START.toISOString() } },
  },
  'bucket-issued': { type: 'bucket-issued', body: { bucketId: id, jobId: uuidv7(), overrideReason: null } },
  'bucket-returned': returned(id),
  'bucket-relocated': relocated(id),
  'bucket-recounted': {
    type: 'bucket-recounted',
    body: { bucketId: id, grossMg: mg(300_000), tareMg: mg(0), displayedMg: 250_000, deltaMg: 50_000 },
  },
  'bucket-discarded': {
    type: 'bucket-discarded',
    body: { bucketId: id, displayedMg: 90_000, reason: 'Dried or gelled', note: null },
  },
  'bucket-adopted': {
    type: 'bucket-adopted',
    body: {
      bucketId: id,
      code: 'AC23467A',
      name: 'Old red',
      familyId: uuidv7(),
      containerId: uuidv7(),
      grossMg: mg(300_000),
      tareMg: mg(68_000),
      locationId: null,
      composition: [],
      lab: null,
    },
  },
  'shift-reported': {
    type: 'shift-reported',
    body: {
      from: '2026-11-30T06:00:00Z',
      to: '2026-11-30T14:00:00Z',
      batches: 1,
      mixedMg: 5,
      reusedMg: 0,
      discards: 0,
      discardedMg: 0,
      openPoints: { waiting: 0, refused: 0, recounts: 0, unreleased: 0, atPress: 0 },
      note: null,
    },
  },
  'entry-dropped': { type: 'entry-dropped', body: { opId: id, reason: 'Typed twice' } },
  'formula-proposed': {
    type: 'formula-proposed',
    body: {
      formulaId: id,
      baseRevision: 1,
      familyId: uuidv7(),
      parts: [{ componentId: uuidv7(), parts: '12.5' }],
      note: null,
    },
  },
};

describe.each(Object.keys(operationBodies) as OperationType[])('a refused %s', (type) => {
  test('sent again untouched says the same, even where this device does not know what it names', () => {
    expect(correct(EXAMPLES[type])).toEqual({ body: EXAMPLES[type], changed: false });
  });

  test('is told in words, each field under a key of its own, without an id', () => {
    const fields = entryFields(refused(EXAMPLES[type]), names);
    expect(new Set(fields.map(keyOf)).size).toBe(fields.length);
    for (const { label, words } of fields) {
      expect(label).not.toBe('');
      expect(words).not.toMatch(/[0-9a-f]{8}-|undefined|null|NaN/);
    }
  });

  test('has something that a person can correct', () => {
    expect(entryFields(refused(EXAMPLES[type]), names).some(({ kind }) => kind !== 'fixed')).toBe(true);
  });
});

describe('a correction', () => {
  test('of a weight keeps what was shown at the scale, so that the change adds up in any order', () => {
    const read = correct(returned(id), { grossMg: '418' });
    expect(read).toMatchObject({
      changed: true,
      body: { body: { grossMg: 418_000, tareMg: 68_000, displayedMg: 500_000, deltaMg: -150_000 } },
    });
  });

  test('of a batch must fill what was weighed in', () => {
    const typed = { 'additions.0.actualMg': '410' };
    expect(correct(EXAMPLES['batch-mixed'], typed)).toEqual({
      problems: { '': '510.005 g went in and 500.005 g were filled. Make them the same.' },
    });
    const both = correct(EXAMPLES['batch-mixed'], { ...typed, 'filled.0.massMg': '510.0050' });
    expect(both).toMatchObject({ body: { body: { filled: [{ massMg: 510_005 }] } } });
  });

  test('of a place chooses one of the shop', () => {
    const move = relocated(id, uuidv7());
    const place = entryFields(refused(move), names).find(({ label }) => label === 'Place');
    if (place?.kind !== 'choice') throw new Error('A move has a place to choose.');
    expect(place.words).toBe('Not in this shop');
    expect(place.options.map(({ name }) => name)).toEqual(['Not in this shop', 'S-1', 'S-2']);
    expect(typedOf(place)).toBe('0');
    expect(correct(move, { locationId: '2' })).toMatchObject({ body: { body: { locationId: shelfB } } });
  });

  test('takes out what may be empty, and asks for what may not', () => {
    const issued = { ...EXAMPLES['bucket-issued'].body, overrideReason: 'Rush' };
    expect(correct({ type: 'bucket-issued', body: issued }, { overrideReason: ' ' })).toMatchObject({
      body: { body: { overrideReason: null } },
    });
    expect(correct(EXAMPLES['bucket-discarded'], { reason: ' ' })).toEqual({
      problems: { reason: 'Say it in a few words.' },
    });
    const named = { ...EXAMPLES['formula-proposed'].body, name: 'Dusk' };
    const unnamed = correct({ type: 'formula-proposed', body: named }, { name: '' });
    expect(unnamed).toEqual({ body: EXAMPLES['formula-proposed'], changed: true });
  });

  test.each([
    ['grossMg', '-5', 'above 0'],
    ['grossMg', '0', 'above 0'],
    ['grossMg', 'NaN', 'not a mass'],
    ['grossMg', 'Infinity', 'not a mass'],
    ['grossMg', '1e9', 'not a mass'],
    ['grossMg', '200000', 'Over 100000 g'],
    ['grossMg', '10', 'below the empty weight'],
    ['grossMg', '1.234', 'two things'],
    ['tareMg', '', 'Type a mass'],
    ['condition', '9', 'Choose one'],
    ['locationId', '-1', 'Choose one'],
  ])('with %s “%s” says what is wrong', (key, text, sentence) => {
    const read = correct(returned(id), { [key]: text });
    expect(read).toMatchObject({ problems: { [key]: expect.stringContaining(sentence) } });
  });

  test('is judged by the schema of its type', () => {
    const read = correct(EXAMPLES['formula-proposed'], { 'parts.0.parts': '0' });
    expect(read).toMatchObject({ problems: { 'parts.0.parts': expect.stringContaining('Not valid') } });
  });
});
