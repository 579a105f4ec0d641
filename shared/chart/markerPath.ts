import type { MarkerShape } from "./familyMarks";

/**
 * Outline of a marker around the origin as an SVG path; areas are about equal, so that no
 * family outweighs another. `r` is the radius of the circle.
 */
export function markerPath(shape: MarkerShape, r: number): string {
  const p = (...points: [number, number][]) =>
    points.map(([x, y], i) => `${i ? "L" : "M"}${round(x * r)} ${round(y * r)}`).join("") + "Z";
  switch (shape) {
    case "circle":
    case "ring":
      return `M${-r} 0A${r} ${r} 0 1 1 ${r} 0A${r} ${r} 0 1 1 ${-r} 0Z`;
    case "square":
      return p([-0.88, -0.88], [0.88, -0.88], [0.88, 0.88], [-0.88, 0.88]);
    case "hourglass":
      return p([-0.95, -1.02], [0.95, -1.02], [0.3, 0], [0.95, 1.02], [-0.95, 1.02], [-0.3, 0]);
    case "diamond":
      return p([0, -1.28], [0.98, 0], [0, 1.28], [-0.98, 0]);
    case "triangle":
      return p([0, -1.2], [1.14, 0.88], [-1.14, 0.88]);
    case "plus":
      return cross(r, 0);
    case "saltire":
      return cross(r, Math.PI / 4);
    case "star":
      return p(
        ...Array.from({ length: 10 }, (_unused, i): [number, number] => {
          const radius = i % 2 === 0 ? 1.38 : 0.58;
          const angle = -Math.PI / 2 + (i * Math.PI) / 5;
          return [radius * Math.cos(angle), radius * Math.sin(angle)];
        }),
      );
  }
}

function cross(r: number, turn: number): string {
  const a = 0.42 * r;
  const b = 1.16 * r;
  const corners: [number, number][] = [
    [-a, -b],
    [a, -b],
    [a, -a],
    [b, -a],
    [b, a],
    [a, a],
    [a, b],
    [-a, b],
    [-a, a],
    [-b, a],
    [-b, -a],
    [-a, -a],
  ];
  const c = Math.cos(turn);
  const s = Math.sin(turn);
  return (
    corners
      .map(([x, y], i) => `${i ? "L" : "M"}${round(x * c - y * s)} ${round(x * s + y * c)}`)
      .join("") + "Z"
  );
}

const round = (value: number) => Math.round(value * 1000) / 1000;
