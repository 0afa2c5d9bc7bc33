import type { Locator } from '@playwright/test';

/** Counts the taps a person needs; typing into what was tapped is not one. */
export class Taps {
  count = 0;

  async on(target: Locator): Promise<void> {
    this.count += 1;
    await target.tap();
  }
}
