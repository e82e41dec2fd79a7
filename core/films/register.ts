/**
 * The register of laws of state: a law is one file and one line here.
 * The name is what a scenario writes in `tension.law`; `constant`, the pure liquid, is a film without a law (constant.ts).
 */
import { createFrumkin } from './frumkin.ts';
import { createHenry } from './henry.ts';
import { createLangmuir } from './langmuir.ts';
import type { CreateLaw } from './law.ts';
import { createVolmer } from './volmer.ts';

/** A law by name: its constructor, and whether it reads `attraction`. */
export interface LawEntry {
  readonly create: CreateLaw;
  readonly usesAttraction: boolean;
}

export const tensionLaws = {
  henry: { create: createHenry, usesAttraction: false },
  langmuir: { create: createLangmuir, usesAttraction: false },
  frumkin: { create: createFrumkin, usesAttraction: true },
  volmer: { create: createVolmer, usesAttraction: false },
} as const satisfies Record<string, LawEntry>;

/** Every name that `tension.law` may have. */
export type TensionLawName = 'constant' | keyof typeof tensionLaws;
