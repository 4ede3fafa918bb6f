import * as z from 'zod/mini';
import type { Milligrams } from '#domain/mass.ts';

/** UUIDs of version 7 where we make them; any UUID is read. */
export const uuid = z.uuid();

/** Whole milligrams, at most 100 kg: no bench scale of the trade weighs more. */
export const LARGEST_MASS = 100_000_000;
export const milligrams = z.pipe(
  z.int().check(z.minimum(0), z.maximum(LARGEST_MASS)),
  z.transform((value) => value as Milligrams),
);
export const addedMilligrams = z.pipe(
  z.int().check(z.minimum(1), z.maximum(LARGEST_MASS)),
  z.transform((value) => value as Milligrams),
);
/** A change of content: negative where ink was used. */
export const massChange = z.int().check(z.minimum(-LARGEST_MASS), z.maximum(LARGEST_MASS));

/** Tub code without the dash: two of the install's prefix, five counted, one check character. */
export const bucketCode = z.string().check(z.regex(/^[0-9A-Z]{8}$/));

export const instant = z.iso.datetime({ offset: true });
export const date = z.iso.date();
export const shortText = z.string().check(z.minLength(1), z.maxLength(200));
export const note = z.string().check(z.maxLength(2000));
