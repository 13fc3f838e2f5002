import { type PlacedBalloon } from './balloon-layout';

const SVG = 'http://www.w3.org/2000/svg';
export const BALLOON_RADIUS_PX = 13;

export interface DrawnBalloon extends PlacedBalloon {
  readonly item: number;
  readonly isSelected: boolean;
  /** Whether the end of the leader line is behind something: it is then dashed. */
  readonly isHidden: boolean;
}

interface BalloonNodes {
  readonly group: SVGGElement;
  readonly leader: SVGLineElement;
  readonly dot: SVGCircleElement;
  readonly circle: SVGCircleElement;
  readonly number: SVGTextElement;
}

/**
 * Item balloons with leader lines over the picture. A second picture of what the parts list says, so
 * it is hidden from screen readers; a click on a balloon selects its piece. Colours come from the
 * style sheet (`sw-balloon…` classes).
 */
export class BalloonOverlay {
  private readonly nodes: BalloonNodes[] = [];

  constructor(
    private readonly svg: SVGSVGElement,
    onPick: (name: string) => void,
  ) {
    this.pick = (event) => {
      const name = (event.target as Element).closest('g')?.dataset['name'];
      if (name) onPick(name);
    };
    svg.addEventListener('click', this.pick);
  }
  private readonly pick: (event: Event) => void;

  draw(balloons: readonly DrawnBalloon[]): void {
    while (this.nodes.length < balloons.length) this.nodes.push(this.add());
    while (this.nodes.length > balloons.length) this.nodes.pop()!.group.remove();
    balloons.forEach((balloon, index) => place(this.nodes[index]!, balloon));
  }

  dispose(): void {
    this.svg.removeEventListener('click', this.pick);
    this.draw([]);
  }

  private add(): BalloonNodes {
    const make = <K extends keyof SVGElementTagNameMap>(name: K, style: string) => {
      const node = this.svg.ownerDocument.createElementNS(SVG, name);
      node.setAttribute('class', style);
      return node;
    };
    const group = make('g', 'sw-balloon');
    const leader = make('line', 'sw-balloon-leader');
    const dot = make('circle', 'sw-balloon-dot');
    const circle = make('circle', 'sw-balloon-circle');
    const number = make('text', 'sw-balloon-number');
    dot.setAttribute('r', '2.5');
    circle.setAttribute('r', String(BALLOON_RADIUS_PX));
    group.append(leader, dot, circle, number);
    this.svg.append(group);
    return { group, leader, dot, circle, number };
  }
}

function place(nodes: BalloonNodes, balloon: DrawnBalloon): void {
  const { x, y, anchorX, anchorY } = balloon;
  const length = Math.hypot(anchorX - x, anchorY - y) || 1;
  // The leader line ends at the rim of the balloon.
  const rimX = x + ((anchorX - x) / length) * BALLOON_RADIUS_PX;
  const rimY = y + ((anchorY - y) / length) * BALLOON_RADIUS_PX;
  nodes.group.dataset['name'] = balloon.name;
  nodes.group.classList.toggle('sw-balloon-selected', balloon.isSelected);
  nodes.group.classList.toggle('sw-balloon-hidden', balloon.isHidden);
  setAll(nodes.leader, { x1: anchorX, y1: anchorY, x2: rimX, y2: rimY });
  setAll(nodes.dot, { cx: anchorX, cy: anchorY });
  setAll(nodes.circle, { cx: x, cy: y });
  setAll(nodes.number, { x, y });
  const text = String(balloon.item);
  if (nodes.number.textContent !== text) nodes.number.textContent = text;
}

function setAll(node: SVGElement, values: Record<string, number>): void {
  for (const [name, value] of Object.entries(values)) node.setAttribute(name, value.toFixed(1));
}
