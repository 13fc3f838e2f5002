import {
  ChangeDetectionStrategy,
  Component,
  computed,
  input,
  linkedSignal,
  output,
} from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatCheckbox } from '@angular/material/checkbox';
import { MatFormField, MatLabel, MatSuffix } from '@angular/material/form-field';
import { MatIcon } from '@angular/material/icon';
import { MatInput } from '@angular/material/input';
import {
  fewestRemeshCells,
  mostRemeshCells,
  noChoices,
  usualRemeshCells,
  type MendingChoices,
} from '../../../../shared/jobs/mending-choices.js';
import { type HoleReport, type MeshReport } from '../../../../shared/jobs/model-inspect.js';
import { writeCount, writeLengthMm } from '../../ui/format/quantities';
import { Notice } from '../../ui/notice/notice';
import { filledBy, limitInFileUnits } from './hole-words';

const holesListed = 50;

/** What a person has to decide about a file, and what else may be decided. */
@Component({
  selector: 'sw-mending-desk',
  imports: [MatButton, MatCheckbox, MatFormField, MatIcon, MatInput, MatLabel, MatSuffix, Notice],
  templateUrl: './mending-desk.html',
  styleUrl: './mending-desk.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class MendingDesk {
  readonly report = input.required<MeshReport>();
  /** Millimetres per unit of the file. */
  readonly millimetres = input.required<number>();
  readonly isAccepted = input(false);
  readonly isReadOnly = input(false);
  /** Whether an inspection runs, so that nothing can be decided now. */
  readonly isBusy = input(false);
  readonly chosen = output<MendingChoices>();
  readonly accepted = output<void>();
  readonly holeShown = output<HoleReport>();

  protected readonly fewestCells = fewestRemeshCells;
  protected readonly mostCells = mostRemeshCells;
  protected readonly fillAsk = computed(() =>
    this.report().asks.find((ask) => ask.kind === 'fill-holes'),
  );
  protected readonly remeshAsk = computed(() =>
    this.report().asks.find((ask) => ask.kind === 'remesh'),
  );
  protected readonly acceptAsk = computed(() =>
    this.report().asks.find((ask) => ask.kind === 'accept'),
  );
  protected readonly hasChoices = computed(() => {
    const { parts, fillHolesUpTo, remeshCells } = this.report().choices;
    return parts !== null || fillHolesUpTo !== null || remeshCells !== null;
  });
  protected readonly deviation = computed(() => {
    const { remeshDeviation } = this.report();
    if (!remeshDeviation) return null;
    const write = (length: number) => `${Number((length * this.millimetres()).toPrecision(2))} mm`;
    const { mean, p95, max } = remeshDeviation;
    return { mean: write(mean), p95: write(p95), max: write(max) };
  });

  protected readonly holes = computed(() => this.report().holes.slice(0, holesListed));
  protected readonly rimMm = linkedSignal(() => {
    const longest = this.fillAsk()?.longest ?? 0;
    return Math.ceil(longest * this.millimetres() * 10) / 10;
  });
  protected readonly fills = computed(() =>
    filledBy(this.report().holes, limitInFileUnits(this.rimMm(), this.millimetres())),
  );

  protected readonly cells = linkedSignal(
    () => this.report().choices.remeshCells ?? usualRemeshCells,
  );
  protected readonly isCellsValid = computed(
    () =>
      Number.isInteger(this.cells()) &&
      this.cells() >= fewestRemeshCells &&
      this.cells() <= mostRemeshCells,
  );
  protected readonly cellSize = computed(() => {
    const longest = Math.max(...this.report().asRead.size) * this.millimetres();
    return `${Number((longest / this.cells()).toPrecision(2))} mm`;
  });

  protected readonly parts = computed(() => this.report().parts);
  protected readonly taken = linkedSignal<readonly boolean[]>(() =>
    this.parts().map((part) => part.isTaken),
  );
  protected readonly isPartsChange = computed(
    () =>
      this.taken().includes(true) &&
      this.taken().some((isTaken, i) => isTaken !== this.parts()[i]?.isTaken),
  );

  protected lengthOf(hole: HoleReport): string {
    return writeLengthMm(hole.perimeter * this.millimetres());
  }

  protected countOf(count: number): string {
    return writeCount(count);
  }

  protected setRim(text: string): void {
    this.rimMm.set(Number(text) || 0);
  }

  protected setCells(text: string): void {
    this.cells.set(Number(text));
  }

  protected take(part: number, isTaken: boolean): void {
    this.taken.update((taken) => taken.map((was, i) => (i === part ? isTaken : was)));
  }

  protected fill(): void {
    const fillHolesUpTo = limitInFileUnits(this.rimMm(), this.millimetres());
    this.chosen.emit({ ...this.report().choices, fillHolesUpTo });
  }

  protected rebuild(): void {
    this.chosen.emit({ ...this.report().choices, remeshCells: this.cells() });
  }

  protected useParts(): void {
    const numbers = this.taken().flatMap((isTaken, i) => (isTaken ? [i] : []));
    const parts = numbers.length === this.parts().length ? null : numbers;
    this.chosen.emit({ ...noChoices, parts });
  }

  protected undo(): void {
    this.chosen.emit(noChoices);
  }
}
