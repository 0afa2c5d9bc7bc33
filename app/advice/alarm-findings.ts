import { z } from 'zod';

/** What an alarm can be about: the class's rate, and which of its items fail first. */
export const alarmKinds = ['rate-rising', 'rate-falling', 'old-first', 'young-first'] as const;
export type AlarmKind = (typeof alarmKinds)[number];

/** What is left of all of a class's failures so far, so that a night takes in only the new ones. */
export const alarmStateSchema = z.object({
  /** Of every failure taken in, in order, with all that its factor was made from. */
  fingerprint: z.string(),
  trend: z.object({
    failures: z.number().int(),
    sum: z.number(),
    lastExposure: z.number().nullable(),
  }),
  /** Takes in only failures of items of known age. ln of each bet's product. */
  age: z.object({
    failures: z.number().int(),
    oldFirst: z.array(z.number()),
    youngFirst: z.array(z.number()),
  }),
});
export type AlarmState = z.infer<typeof alarmStateSchema>;

/** The evidence of one class on one night, over its whole record. */
export const alarmFindingsSchema = z.object({
  /** Failures behind the two alarms on the rate, and behind the two on age. */
  failures: z.object({ rate: z.number().int(), age: z.number().int() }),
  /** ln E of each kind; 0 says nothing either way. */
  logE: z.record(z.enum(alarmKinds), z.number()),
});
export type AlarmFindings = z.infer<typeof alarmFindingsSchema>;
