/** What an analysis report prints: numbers computed and texts chosen before; nothing here computes. Display units. */
import type { CriterionResult } from '#shared/analysis/criteria-8785c.ts';
import type { Mode } from '#shared/analysis/modes.ts';
import type { SPlaneBoundary } from '#shared/analysis/s-plane-regions.ts';

export interface ReportHead {
  number: string;
  organisation: string;
  /** Words of the organisation below the fixed caution. */
  caution: string;
  /** Time of printing in words. */
  printed: string;
  programVersion: string;
  /** Name of the study; empty when the state was not saved. */
  study: string;
  slug: string;
  name: string;
  revision: number;
  status: string;
  /** Who released or saved the revision, when and why. */
  provenance: string;
  /** SHA-256 of the revision's JSON export, hexadecimal. */
  digest: string;
}

export interface ReportDerivative {
  /** e.g. CY_beta */
  key: string;
  value: number;
  uncertaintyPct: number | null;
  /** Letter of its source; empty without one. */
  letter: string;
}

export interface ReportLimit {
  name: string;
  speed: number | null;
  binds: string;
  sideslipDeg: number | null;
  aileronDeg: number | null;
  rudderDeg: number | null;
  /** Twice the standard deviation over seeded draws; null without stated uncertainties. */
  twoSigma: number | null;
}

export interface ReportInput {
  field: string;
  value: string;
  letter: string;
  uncertaintyPct: number | null;
}

export interface AnalysisReport {
  /** Of every speed in the report, calibrated unless it says otherwise: kt or m/s. */
  speedUnit: string;
  head: ReportHead;
  facts: { label: string; value: string }[];
  /** Derivatives moved for the study, in words; empty when the revision's own data is shown. */
  moved: string;
  derivatives: ReportDerivative[];
  sources: { letter: string; text: string }[];
  inertias: string;
  sPlane: {
    boundaries: SPlaneBoundary[];
    top: number;
    roots: { re: number; im: number }[];
    /** Oscillatory roots over speed. */
    locus: { speed: number; re: number; im: number }[];
  };
  controlSpeed: {
    /** Why there is none; null when drawn. */
    reason: string | null;
    failed: string;
    bankDeg: number[];
    speed: (number | null)[];
    stall: number;
  };
  criteria: CriterionResult[];
  modes: Mode[];
  limits: ReportLimit[];
  draws: number;
  compared: { label: string; cells: string[] }[];
  inputs: ReportInput[];
  cautions: string[];
  answers: { field: string; message: string; answer: string }[];
}
