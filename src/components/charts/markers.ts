/**
 * Marker shapes as SVG path data around (0, 0), so canvas and HTML legend draw the very same thing.
 * Colour is never the only sign: a bench has a shape, a colour and its number.
 */

export const SHAPES = ['circle', 'square', 'triangle', 'diamond', 'cross', 'plus', 'star', 'ring'] as const;
export type Shape = (typeof SHAPES)[number];

/** Path data of a shape that looks as large as a disc of this radius. */
export function shapePath(shape: Shape, radius: number): string {
  switch (shape) {
    case 'circle':
      return disc(radius);
    case 'ring':
      // Outer disc one way round, inner the other: the hole stays empty when filled.
      return `${disc(radius)} ${disc(radius * 0.5, 0)}`;
    case 'square':
      return polygon(
        [
          [-0.9, -0.9],
          [0.9, -0.9],
          [0.9, 0.9],
          [-0.9, 0.9],
        ],
        radius,
      );
    case 'triangle':
      return polygon(
        [
          [0, -1.2],
          [1.1, 0.85],
          [-1.1, 0.85],
        ],
        radius,
      );
    case 'diamond':
      return polygon(
        [
          [0, -1.3],
          [1.1, 0],
          [0, 1.3],
          [-1.1, 0],
        ],
        radius,
      );
    case 'plus':
      return polygon(PLUS, radius);
    case 'cross':
      return polygon(
        PLUS.map(([x, y]) => [(x - y) * Math.SQRT1_2, (x + y) * Math.SQRT1_2]),
        radius,
      );
    case 'star':
      return polygon(
        Array.from({ length: 10 }, (_, i) => {
          const reach = i % 2 === 0 ? 1.35 : 0.6;
          const angle = (i * Math.PI) / 5;
          return [reach * Math.sin(angle), -reach * Math.cos(angle)];
        }),
        radius,
      );
  }
}

/** Shape of a bench: neighbours differ, and with five colours forty benches are all different. */
export function benchShape(bench: number): Shape {
  return SHAPES[(bench - 1) % SHAPES.length]!;
}

type Point = [number, number];
const ARM = 0.38;
const PLUS: Point[] = [
  [-ARM, -1.25],
  [ARM, -1.25],
  [ARM, -ARM],
  [1.25, -ARM],
  [1.25, ARM],
  [ARM, ARM],
  [ARM, 1.25],
  [-ARM, 1.25],
  [-ARM, ARM],
  [-1.25, ARM],
  [-1.25, -ARM],
  [-ARM, -ARM],
];

function polygon(points: number[][], radius: number): string {
  return `M${points.map(([x, y]) => `${round(x! * radius)} ${round(y! * radius)}`).join('L')}Z`;
}

function disc(radius: number, sweep: 0 | 1 = 1): string {
  const r = round(radius);
  return `M${-r} 0A${r} ${r} 0 1 ${sweep} ${r} 0A${r} ${r} 0 1 ${sweep} ${-r} 0Z`;
}

const round = (n: number) => Math.round(n * 100) / 100;
