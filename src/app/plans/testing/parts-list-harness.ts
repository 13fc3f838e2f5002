import { ComponentHarness, TestKey, type TestElement } from '@angular/cdk/testing';

/** Drives the parts list as a person does. */
export class PartsListHarness extends ComponentHarness {
  static readonly hostSelector = 'sw-parts-list';

  private readonly buttons = this.locatorForAll('button.piece');
  private readonly rows = this.locatorForAll('tbody tr');

  /** The rows as read out: cells joined by a bar. */
  async texts(): Promise<string[]> {
    return Promise.all((await this.rows()).map((row) => row.text()));
  }

  /** Names of the pieces whose row is chosen. */
  async chosen(): Promise<string[]> {
    return this.namesWhere('aria-pressed', 'true');
  }

  /** Names of the pieces whose row takes part in the tab order. */
  async inTabOrder(): Promise<string[]> {
    return this.namesWhere('tabindex', '0');
  }

  async choose(name: string): Promise<void> {
    await (await this.button(name)).click();
  }

  async press(name: string, key: 'down' | 'up' | 'home' | 'end'): Promise<void> {
    const keys = {
      down: TestKey.DOWN_ARROW,
      up: TestKey.UP_ARROW,
      home: TestKey.HOME,
      end: TestKey.END,
    };
    await (await this.button(name)).sendKeys(keys[key]);
  }

  /** Name of the piece whose row has the focus. */
  async focused(): Promise<string | null> {
    for (const button of await this.buttons())
      if (await button.isFocused()) return (await button.text()).trim();
    return null;
  }

  private async button(name: string): Promise<TestElement> {
    for (const button of await this.buttons())
      if ((await button.text()).trim() === name) return button;
    throw new Error(`The parts list has no piece ${name}.`);
  }

  private async namesWhere(attribute: string, value: string): Promise<string[]> {
    const names: string[] = [];
    for (const button of await this.buttons())
      if ((await button.getAttribute(attribute)) === value)
        names.push((await button.text()).trim());
    return names;
  }
}
