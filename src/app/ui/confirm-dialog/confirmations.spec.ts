import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { ChangeDetectionStrategy, Component } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { MatButtonHarness } from '@angular/material/button/testing';
import { MatDialogHarness } from '@angular/material/dialog/testing';
import { Confirmations } from './confirmations';

// The first test compiles the templates, which takes its time on a busy machine.
vi.setConfig({ testTimeout: 30_000 });

@Component({
  selector: 'sw-somewhere',
  template: '',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
class Somewhere {}

async function setUp() {
  const fixture = TestBed.createComponent(Somewhere);
  const loader = TestbedHarnessEnvironment.documentRootLoader(fixture);
  const answer = TestBed.inject(Confirmations).ask({
    title: 'Remove Heron?',
    sentence: 'This cannot be undone.',
    action: 'Remove',
  });
  const dialog = await loader.getHarness(MatDialogHarness);
  return { answer, dialog };
}

describe('Confirmations', () => {
  it('asks in the words given, as an alert', async () => {
    const { answer, dialog } = await setUp();
    expect(await dialog.getTitleText()).toBe('Remove Heron?');
    expect(await dialog.getContentText()).toBe('This cannot be undone.');
    expect(await dialog.getRole()).toBe('alertdialog');
    await dialog.close();
    expect(await answer).toBe(false);
  });

  it('goes through with it only by the button of the action', async () => {
    const { answer, dialog } = await setUp();
    await (await dialog.getHarness(MatButtonHarness.with({ text: 'Remove' }))).click();
    expect(await answer).toBe(true);
  });

  it('takes the other button for a no', async () => {
    const { answer, dialog } = await setUp();
    await (await dialog.getHarness(MatButtonHarness.with({ text: 'Keep it' }))).click();
    expect(await answer).toBe(false);
  });
});
