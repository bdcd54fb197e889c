/** Sets of dimension 2 that are positive on some cone. */
import { type Numbers, POSITIVE_PAIR } from "../walks.js";

/** Continued fractions with digits a and b: determinants -1. */
export const digitPair = (a: number, b: number): Numbers[] => [
  [
    [a, 1],
    [1, 0],
  ],
  [
    [b, 1],
    [1, 0],
  ],
];

type Plane = [[number, number], [number, number]];

const times = (a: Plane, b: Plane) =>
  a.map((row) => [0, 1].map((k) => row[0]! * b[0]![k]! + row[1]! * b[1]![k]!)) as Plane;

/** U A U^-1 for U = [[3, 5], [4, 7]]. */
export function turned(set: readonly Numbers[]): Numbers[] {
  const [u, v]: [Plane, Plane] = [
    [
      [3, 5],
      [4, 7],
    ],
    [
      [7, -5],
      [-4, 3],
    ],
  ];
  return set.map((a) => times(times(u, a as Plane), v));
}

export function inverses(set: readonly Numbers[]): Numbers[] {
  return set.map((m) => {
    const [[a, b], [c, d]] = m as Plane;
    const determinant = a * d - b * c;
    return [
      [d * determinant, -b * determinant],
      [-c * determinant, a * determinant],
    ];
  });
}

export const POSITIVE_SETS: readonly [string, readonly Numbers[]][] = [
  ["a positive pair", POSITIVE_PAIR],
  ["the same in another basis", turned(POSITIVE_PAIR)],
  ["its inverses", inverses(POSITIVE_PAIR)],
  ["digits 1 and 2", digitPair(1, 2)],
  ["digits 1 and 100", digitPair(1, 100)],
  ["with signs", turned(digitPair(-1, -3))],
  [
    "with the identity and minus a move",
    [
      [
        [1, 0],
        [0, 1],
      ],
      [
        [-2, -1],
        [-1, -1],
      ],
      [
        [5, 2],
        [2, 1],
      ],
    ],
  ],
  [
    "eigenlines far apart",
    [
      [
        [10, 1],
        [9, 1],
      ],
      [
        [1, 1],
        [9, 10],
      ],
    ],
  ],
];
