import type { Effect, OutsideCause } from '~/models/failure';

/** What was done, in the words of the person who did it. */
export const effectWords: Record<Effect, string> = {
  renewed: 'Put a new one in',
  patched: 'Fixed the same one',
};

export const outsideCauseWords: Record<OutsideCause, string> = {
  struck: 'Struck or run into',
  flooded: 'Flooded or soaked',
  power: 'Power surge or loss',
  vandalism: 'Vandalism',
  weather: 'Weather',
  other: 'Something else outside',
};

/** "Fenwick Baths, plant room 1" */
export function placeWords(place: { siteName: string; areaName: string | null }): string {
  return place.areaName ? `${place.siteName}, ${place.areaName}` : place.siteName;
}
