export const effects = ['renewed', 'patched'] as const;
/** `renewed`: a new or as-good-as-new item is in place afterwards; `patched`: the same item goes on. */
export type Effect = (typeof effects)[number];

export const outsideCauses = ['struck', 'flooded', 'power', 'vandalism', 'weather', 'other'] as const;
export type OutsideCause = (typeof outsideCauses)[number];

/** A failure as a person reports it. Days are 'YYYY-MM-DD' in the organisation's zone. */
export interface FailureEntry {
  /** Made before the entry is sent, so that the same entry sent twice is stored once. */
  readonly id: string;
  readonly assetId: string;
  readonly failedOn: string;
  /** The moment, where the time of day is known. */
  readonly failedAt: Date | null;
  readonly modeId: string | null;
  readonly effect: Effect;
  readonly outsideCause: OutsideCause | null;
  /** When the failed item had been fitted, if the person knows. */
  readonly itemFittedOn: string | null;
  readonly note: string | null;
}

/** A failure as it is stored, with the names a reader needs. */
export interface Failure extends FailureEntry {
  readonly tag: string;
  readonly quantity: number;
  readonly classId: string;
  readonly className: string;
  readonly itemSingular: string;
  readonly clock: 'calendar-days' | 'operating-hours';
  readonly siteId: string;
  readonly siteName: string;
  readonly areaName: string | null;
  readonly modeName: string | null;
  /** Age of the failed item in the class's clock unit, where the record gives that instead of a day. */
  readonly itemAge: number | null;
  readonly loggedAt: Date;
  readonly loggedById: string | null;
  readonly loggedByName: string | null;
  readonly voidedAt: Date | null;
  readonly voidedById: string | null;
  readonly voidedByName: string | null;
  readonly voidReason: string | null;
  readonly version: number;
}
