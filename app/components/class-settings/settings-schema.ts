import { z } from 'zod';
import type { ClassSettings } from '~/models/asset-classes.server';
import { moneyFieldText, parseMoney } from '~/models/money';
import { parseAvailability } from './availability';

const itemName = z
  .string({ error: 'Say what one of them is called.' })
  .trim()
  .min(1, 'Say what one of them is called.')
  .max(80, 'Keep this to 80 characters.');

const modeName = z
  .string({ error: 'Give the mode a name.' })
  .trim()
  .min(1, 'Give the mode a name.')
  .max(120, 'Keep the name to 120 characters.');

const leadTimeSentence = 'Write a whole number of days from 1 to 3,650.';
const leadTimeDays = z
  .number({ error: leadTimeSentence })
  .int(leadTimeSentence)
  .min(1, leadTimeSentence)
  .max(3650, leadTimeSentence);

/** Everything the settings page can send; costs are in the major unit of the currency, with decimals. */
export function settingsFormSchema(currency: string) {
  const cost = z
    .string()
    .trim()
    .optional()
    .transform((text, context) => {
      if (!text) return null;
      const minor = parseMoney(text, currency);
      if (minor !== undefined) return minor;
      context.addIssue({
        code: 'custom',
        message: `Write an amount such as ${moneyFieldText(125_050, currency)}, without separators between thousands.`,
      });
      return z.NEVER;
    });
  return z.discriminatedUnion('intent', [
    z
      .object({
        intent: z.literal('save'),
        version: z.number().int(),
        name: z
          .string({ error: 'Give the class a name.' })
          .trim()
          .min(1, 'Give the class a name.')
          .max(120, 'Keep the name to 120 characters.'),
        itemSingular: itemName,
        itemPlural: itemName,
        clock: z.enum(['calendar-days', 'operating-hours'], { error: 'Choose what its age is counted in.' }),
        criticality: z.number({ error: 'Choose how much it matters.' }).int().min(1).max(4),
        statutory: z.boolean().default(false),
        endangersPeople: z.boolean().default(false),
        hiddenFailures: z.boolean().default(false),
        plannedCost: cost,
        failureCost: cost,
        groupPlannedCost: cost,
        sparesLeadTimeDays: leadTimeDays.optional(),
        requiredAvailability: z.string().trim().optional(),
        confirm: z.array(z.enum(['statutory-off', 'endangers-people-off', 'clock'])).default([]),
      })
      .transform((form, context) => ({ ...form, requiredAvailability: availabilityOf(form, context) })),
    z.object({ intent: z.literal('add-mode'), modeName }),
    z.object({ intent: z.literal('rename-mode'), modeId: z.uuid(), seenName: z.string(), modeName }),
  ]);
}

/** The field is out of sight, and asks nothing, unless failures stay hidden. */
function availabilityOf(
  { hiddenFailures, requiredAvailability }: { hiddenFailures: boolean; requiredAvailability?: string },
  context: z.RefinementCtx,
): number | null {
  if (!hiddenFailures || !requiredAvailability) return null;
  const share = parseAvailability(requiredAvailability);
  if (share !== undefined) return share;
  context.addIssue({
    code: 'custom',
    path: ['requiredAvailability'],
    message: 'Write a percentage from 50 to 99.999, such as 99.5.',
  });
  return z.NEVER;
}

export type SettingsForm = Extract<z.output<ReturnType<typeof settingsFormSchema>>, { intent: 'save' }>;

export function settingsOfForm(form: SettingsForm): ClassSettings {
  return {
    name: form.name,
    itemSingular: form.itemSingular,
    itemPlural: form.itemPlural,
    clock: form.clock,
    criticality: form.criticality,
    statutory: form.statutory,
    endangersPeople: form.endangersPeople,
    hiddenFailures: form.hiddenFailures,
    plannedCostMinor: form.plannedCost,
    failureCostMinor: form.failureCost,
    groupPlannedCostMinor: form.groupPlannedCost,
    sparesLeadTimeDays: form.sparesLeadTimeDays ?? null,
    requiredAvailability: form.requiredAvailability,
  };
}
