import type { EdgeReport } from '../../shared/geometry/mesh/topology.js';
import { countOf, spelledCount } from '../intake/refusal-words.js';
import type { Orientation } from './orientation.js';

/** Why a surface that is not closed cannot be planned, with its counts. */
export function openSurfaceRefusal(edges: EdgeReport, duplicates: number): string {
  const found: string[] = [];
  if (edges.openEdges > 0)
    found.push(`${countOf(edges.openEdges, 'edge')} with a facet on one side only`);
  if (edges.nonManifoldEdges > 0)
    found.push(`${countOf(edges.nonManifoldEdges, 'edge')} shared by more than two facets`);
  if (edges.misorientedEdges > 0)
    found.push(`${countOf(edges.misorientedEdges, 'edge')} whose two facets face opposite ways`);
  const repeated =
    duplicates > 0
      ? ` ${countOf(duplicates, 'facet')} ${duplicates === 1 ? 'repeats another' : 'repeat others'}.`
      : '';
  const isOpen = edges.openEdges + edges.nonManifoldEdges > 0;
  return isOpen
    ? `The surface is not closed: ${listOf(found)}.${repeated} A plan needs a closed surface, because only that says what is inside.`
    : `The facets do not agree on which side is outside: ${listOf(found)}.${repeated} A plan needs to know what is inside.`;
}

/** Why a closed surface whose shells contradict each other cannot be planned. */
export function mixedShellsRefusal(shells: number, orientation: Orientation): string {
  const found: string[] = [];
  if (orientation.insideOut > 0)
    found.push(
      `${spelledCount(orientation.insideOut)} ${orientation.insideOut === 1 ? 'is' : 'are'} inside out`,
    );
  if (orientation.doubled > 0)
    found.push(
      `${spelledCount(orientation.doubled)} ${orientation.doubled === 1 ? 'lies' : 'lie'} inside another as a second solid, so that volume would count twice`,
    );
  return `Of ${countOf(shells, 'shell')}, ${listOf(found)}. Turn or remove them in the program that made the model.`;
}

export function flatRefusal(shells: number, flat: number): string {
  return shells === flat
    ? 'The surface encloses no volume: it is flat, or its two sides lie on each other.'
    : `Of ${countOf(shells, 'shell')}, ${spelledCount(flat)} ${flat === 1 ? 'encloses' : 'enclose'} no volume. Remove ${flat === 1 ? 'it' : 'them'} in the program that made the model.`;
}

/** "a", "a and b", "a, b and c". */
export function listOf(parts: readonly string[]): string {
  if (parts.length < 2) return parts.join('');
  return `${parts.slice(0, -1).join(', ')} and ${parts.at(-1)}`;
}
