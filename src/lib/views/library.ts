import type { CriterionRule } from '../domain/criteria';
import type { StructureView } from './structure';

/** An analyte as lists and matches show it. */
export interface AnalyteBrief {
  readonly id: string;
  readonly name: string;
  readonly cas: string | null;
  readonly class: string | null;
  readonly formula: string | null;
  readonly molarMass: number | null;
  readonly logKow: number | null;
  readonly pkaAcid: readonly number[];
  readonly pkaBase: readonly number[];
  readonly boilingPointC: number | null;
  readonly henryPaM3Mol: number | null;
  readonly version: number;
}

export interface AnalyteVersionView extends AnalyteBrief {
  readonly versionId: string;
  readonly synonyms: readonly string[];
  readonly smiles: string | null;
  readonly vapourPressurePa: number | null;
  readonly waterSolubilityMgL: number | null;
  readonly sources: Readonly<Record<string, string>>;
  readonly note: string | null;
  readonly createdBy: string | null;
  readonly createdAt: string;
}

export interface AnalyteView {
  readonly id: string;
  readonly current: AnalyteVersionView;
  /** Newest first. */
  readonly versions: readonly AnalyteVersionView[];
  /** Studies that have it on their panel. */
  readonly studies: readonly { readonly code: string; readonly title: string; readonly version: number }[];
}

/** Another analyte of the library that may be the same substance, and what says so. */
export interface LikenessView {
  readonly id: string;
  readonly name: string;
  /** `stereochemistry`: the same structure but for it. */
  readonly by: 'name' | 'CAS number' | 'structure' | 'stereochemistry';
}

/** What a form says of an analyte before it is stored. */
export interface AnalytePreview {
  readonly structure: StructureView;
  readonly alike: readonly LikenessView[];
}

export interface AnalytePage {
  readonly analytes: readonly AnalyteBrief[];
  readonly total: number;
  readonly page: number;
  readonly pages: number;
}

/** What one pasted line was recognised as. */
export interface NameMatch {
  readonly line: string;
  readonly analyte: AnalyteBrief | null;
  readonly matchedBy: 'CAS number' | 'name' | 'synonym' | null;
  /** Where nothing, or more than one thing, fits: what is near. */
  readonly near: readonly AnalyteBrief[];
  /** Why there is no match, in a sentence. */
  readonly problem: string | null;
}

export interface CriteriaSetBrief {
  readonly id: string;
  readonly versionId: string;
  readonly version: number;
  readonly name: string;
  readonly rules: readonly CriterionRule[];
  readonly createdAt: string;
  readonly createdBy: string | null;
}

export interface CriteriaSetView {
  readonly id: string;
  readonly current: CriteriaSetBrief;
  /** Newest first. */
  readonly versions: readonly CriteriaSetBrief[];
  readonly studies: readonly { readonly code: string; readonly title: string; readonly version: number }[];
}
