/**
 * The tree walk: exact positions of a long walk in quasi-linear time. Divide and conquer
 * over moves: from the point at a node's first move, the product of its left half moves
 * the point to its middle; then each half is walked from a point cut to the bits that it
 * needs. Leaves go to the window kernel.
 *
 * Bits. need(leaf) is the window's; need(node) = max(need(left), log2 |P| + need(right)) + 2
 * with P the left half's product, |P| its row-sum norm, bounded from above by a product in
 * doubles with its radius. A point within 2^-need(node) leaves its left half's point within
 * 2^-need(left) (1/4, and at most 1/2 for the cut at a whole limb), and its right half's
 * within 2^-need(right) (1/4 carried, 1/8 wrapped from above, the cut at most 1/2); so the
 * positions are as right as the window's from digits of its own.
 *
 * Memory is a stack: a node's right point, then its left half's subtree, which is given
 * back when the left half is walked. Transforms take ten times the memory of what they are
 * made of: they are kept for the small spans, as many as the arena may take in comfort, and
 * made again for the large ones. All is planned before the first byte is taken.
 */

import { LimitError } from "../errors.js";
import { writeLimbs } from "./bigint.js";
import type { Kernel } from "./kernel.js";
import type { WindowTable } from "./trajectory.js";
import { keepsTransforms, type Span, treeMemory } from "./tree-memory.js";
import { type TreeCosts, treeWork, workCosts } from "./tree-work.js";

/** A product in doubles, for bounds: entries 2^exponent, within radius 2^exponent. */
interface Rough {
  readonly entries: Float64Array;
  readonly norm: number;
  readonly exponent: number;
  readonly radius: number;
}

interface Entries {
  readonly entries: number;
  readonly limbs: number;
  readonly bits: number;
}

/** A node whose product has been formed. Entries live on the integer stack until its parent is formed. */
interface Built extends Entries {
  readonly halves?: readonly [Built, Built];
  /** Its left half's product, as it is kept: transformed, or as a copy of the entries. */
  readonly left?: Transforms | Entries;
}

interface Shape {
  readonly length: number;
  readonly width: number;
}

interface Transforms {
  readonly plan: number;
  readonly length: number;
  readonly width: number;
  readonly at: number;
  readonly notes: number;
  readonly bits: number;
}

/** Fractions: component j's top limb ends at top + j stride. */
interface Point {
  readonly top: number;
  readonly stride: number;
  readonly limbs: number;
}

/** A block of positions in order; the views last until the next block is asked for. */
export interface TreeBlock {
  /** The first position's number. */
  readonly first: number;
  /** 0 between products: nothing to read, but a moment at which the walk may be left waiting. */
  readonly rows: number;
  /** rows x dimension x words 64-bit words. */
  readonly positions: BigUint64Array<ArrayBuffer>;
}

const PAUSE: TreeBlock = { first: 0, rows: 0, positions: new BigUint64Array(0) };

const NOTE_BYTES = 16;
/** Plans of batches are kept up to this, made anew beyond. */
const KEPT_BYTES = 2 ** 26;
/** Digit widths, widest first; narrower digits for longer products (see assembly/fixed/transform.ts). */
const WIDTHS = [14, 12, 10, 8];
/** What the proof asks a coefficient's error to stay below. */
const ERROR_LIMIT = 0.4375;
/** Bytes up to which transforms are kept rather than made again. */
const COMFORT = 2 ** 28;
/** Bits of a leaf's product, by the moves' row sums: where the transform overtakes the window (bench/tree.ts). */
const LEAF_BITS = 6000;

const scratch = new DataView(new ArrayBuffer(8));
/** The least e with x < 2^e, for x > 0. */
function exponentAbove(x: number): number {
  scratch.setFloat64(0, x);
  return ((scratch.getUint32(0) >>> 20) & 0x7ff) - 1022;
}

export class TreeRun {
  private readonly d: number;
  private readonly inputs: number;
  private readonly window: number;
  private readonly choicesAt: number;
  /** Each leaf's plan of batches, where they are kept: they are read two or three times. */
  private readonly plansOfLeaves: { readonly at: number; readonly batches: number }[] = [];
  private readonly spare: number;
  private readonly state: number;
  private readonly stateLimbs: number;
  private readonly out: number;
  /** The position where leaf jointLeaf - 1 ended. */
  private readonly joint: number;
  private jointLeaf = 0;
  private readonly leaves: number;
  private readonly plans = new Map<number, number>();
  private readonly shapes = new Map<Span, Shape>();
  private readonly root: Span;
  private readonly integers: number;
  private readonly digits: number;
  private firstLeaf = 0;
  /** Leaves of the largest span whose transforms are kept. */
  private keep = 1;
  private constants: Point = { top: 0, stride: 0, limbs: 0 };
  private readonly work: TreeCosts;
  private workDone = 0;
  private workTotal: number;

  /**
   * @param choices the moves, u16, all of them
   * @param words 64-bit words of each coordinate of a position
   * @param leafMoves moves of a leaf; by default what makes products of some 900 bits
   * @param comfort bytes up to which transforms are kept rather than made again
   * @throws LimitError before any memory is taken that does not fit
   */
  constructor(
    private readonly kernel: Kernel,
    table: WindowTable,
    choices: Uint16Array,
    private readonly words: number,
    private readonly leafMoves: number = defaultLeaf(table),
    private readonly comfort: number = COMFORT,
    /** Bits held beside what is proved to be needed; negative in the test of the walk's own check. */
    spareBits: number = 0,
  ) {
    const { raw } = kernel;
    const { dimension, inputs, matrices, norms } = table;
    this.d = dimension;
    this.inputs = inputs;
    this.steps = choices.length;
    this.leaves = Math.max(1, Math.ceil(this.steps / leafMoves));
    const moves = kernel.alloc(matrices.byteLength, "the table of moves");
    const normsAt = kernel.alloc(norms.byteLength, "the table of moves");
    this.window = kernel.alloc(raw.windowBytes(), "a run's state");
    const work = kernel.alloc(raw.windowWorkBytes(dimension, inputs, words), "a run's work space");
    this.choicesAt = kernel.alloc(2 * this.steps, "the choices of moves");
    const record = raw.windowRecordBytes(dimension, inputs);
    this.spare = kernel.alloc(leafMoves * record, "the plan of batches");
    this.out = kernel.alloc(8 * (leafMoves + 1) * dimension * words, "a block of positions");
    this.joint = kernel.alloc(8 * dimension * words, "a block of positions");
    kernel.i64(moves, matrices.length).set(matrices);
    kernel.f64(normsAt, norms.length).set(norms);
    kernel.u16(this.choicesAt, this.steps).set(choices);
    raw.windowOpen(this.window, dimension, inputs, words, moves, normsAt, norms.length, work);
    let widest = 0;
    const leaves: { span: Span; rough: Rough }[] = [];
    let kept = 0;
    for (let leaf = 0; leaf < this.leaves; leaf++) {
      this.planLeaf(leaf);
      const batches = raw.windowBatches(this.window);
      if (kept < KEPT_BYTES) {
        const at = kernel.alloc(batches * record, "the plan of batches");
        kernel.u8(at, batches * record).set(kernel.u8(this.spare, batches * record));
        this.plansOfLeaves.push({ at, batches });
        kept += batches * record;
      }
      const limbs = raw.windowLimbs(this.window);
      widest = Math.max(widest, limbs);
      const rough = this.roughLeaf();
      const size = exponentAbove(rough.norm + rough.radius) + rough.exponent;
      leaves.push({ span: { from: leaf, to: leaf + 1, need: 32 * limbs + spareBits, size }, rough });
      widest = Math.max(widest, Math.ceil((size + 3) / 32));
    }
    this.root = this.join(leaves, 0, this.leaves).span;
    this.stateLimbs = widest + 2;
    this.state = kernel.alloc(4 * this.stateLimbs * inputs, "a leaf's digits");
    this.digits = kernel.alloc(8 * this.limbs * inputs, "the start's digits");
    this.makePlans();
    this.integers = kernel.alloc(this.integerBytes(), "the products of moves");
    this.planMemory();
    this.work = workCosts(dimension, inputs, leafMoves, this.keep, (span) => this.shape(span).length);
    this.workTotal = treeWork(this.root, 0, this.work);
  }

  readonly steps: number;

  /** Bits that the moves consume, at most: of the whole product's row-sum norm. */
  get consumes(): number {
    return this.root.size;
  }

  /** 64-bit limbs that each fraction of the start and each constant must have. */
  get limbs(): number {
    return limbsFor(this.root);
  }

  /** The walk's work and how much of it is done, in seconds of the machine that the costs were measured on. */
  get progress(): { readonly done: number; readonly total: number } {
    return { done: this.workDone, total: this.workTotal };
  }

  private count(leaf: number): number {
    return Math.min(this.leafMoves, this.steps - leaf * this.leafMoves);
  }

  private planLeaf(leaf: number): void {
    const { raw } = this.kernel;
    const at = this.choicesAt + 2 * leaf * this.leafMoves;
    const kept = this.plansOfLeaves[leaf];
    if (kept !== undefined) {
      raw.windowReplay(this.window, at, kept.at, kept.batches);
      return;
    }
    const status = raw.windowPlan(this.window, at, this.count(leaf), this.spare, this.leafMoves);
    if (status !== 0) throw new Error(`windowPlan: more batches than moves in leaf ${leaf}`);
  }

  private roughLeaf(): Rough {
    const { kernel, d, inputs } = this;
    const n = d * inputs;
    return kernel.scoped(() => {
      const at = kernel.alloc(8 * (2 * n + 2), "a product in doubles");
      kernel.raw.windowProduct(this.window, at);
      const values = kernel.f64(at, 2 * n + 2);
      const entries = values.slice(0, n);
      return { entries, norm: rowNorm(entries, inputs), exponent: values[2 * n]!, radius: values[2 * n + 1]! };
    });
  }

  /** The span of leaves [from, to) and its product in doubles. */
  private join(
    leaves: readonly { span: Span; rough: Rough }[],
    from: number,
    to: number,
  ): { span: Span; rough: Rough } {
    if (to - from === 1) return leaves[from]!;
    // The largest power of two below the length, so that left halves share their plans.
    const middle = from + 2 ** (31 - Math.clz32(to - from - 1));
    const left = this.join(leaves, from, middle);
    const right = this.join(leaves, middle, to);
    const rough = multiplyRough(right.rough, left.rough, this.d, this.inputs);
    const need = Math.max(left.span.need, left.span.size + right.span.need) + 2;
    const size = Math.min(left.span.size + right.span.size, exponentAbove(rough.norm + rough.radius) + rough.exponent);
    return { span: { from, to, need, size, halves: [left.span, right.span] }, rough };
  }

  /**
   * Walks from the start: `start` holds, for each component (coordinates, then constants),
   * floor(x 2^(64 limbs)) modulo 2^(64 limbs). With `from`, the walk goes to that move by
   * products alone, and blocks begin with the leaf that it is in.
   */
  *walk(start: readonly bigint[], from = 0): Generator<TreeBlock, void, void> {
    const { kernel, limbs, digits: at } = this;
    const stride = 8 * limbs;
    for (const [j, x] of start.entries()) writeLimbs(kernel, at + j * stride, limbs, x);
    const point = { top: at + stride, stride, limbs };
    this.constants = { top: point.top + this.d * stride, stride, limbs };
    this.jointLeaf = -1;
    this.firstLeaf = Math.min(this.leaves - 1, Math.floor(from / this.leafMoves));
    this.workDone = 0;
    this.workTotal = treeWork(this.root, this.firstLeaf, this.work);
    yield* this.node(this.root, point, undefined);
    this.kernel.raw.windowEmit(this.window, this.out);
    yield { first: this.steps, rows: 1, positions: kernel.u64(this.out, this.d * this.words) };
  }

  private *node(span: Span, point: Point, built: Built | undefined): Generator<TreeBlock, void, void> {
    if (span.halves === undefined) {
      const block = this.leaf(span.from, point);
      this.workDone += this.work.walkLeaf();
      yield block;
      return;
    }
    const [left, right] = span.halves;
    const { raw } = this.kernel;
    const cutHere = cut(point, limbsFor(span));
    const before = raw.mark();
    const stride = 8 * cutHere.limbs;
    const at = this.kernel.alloc(stride * this.d, "a point on the way");
    const after = raw.mark();
    const whole = built?.halves !== undefined ? built : undefined;
    const leftBuilt = whole?.halves?.[0] ?? (yield* this.build(left, this.integers));
    const product = whole?.left ?? leftBuilt;
    const lost =
      "plan" in product
        ? this.apply(product, cutHere, at, stride)
        : this.kernel.scoped(() => this.apply(this.transform(span, product), cutHere, at, stride));
    this.workDone += this.work.apply(span, whole !== undefined);
    yield PAUSE;
    if (left.to > this.firstLeaf) yield* this.node(left, cutHere, leftBuilt);
    raw.release(after);
    const moved = { top: at + stride, stride, limbs: cutHere.limbs - lost };
    yield* this.node(right, moved, whole?.halves?.[1]);
    raw.release(before);
  }

  private leaf(leaf: number, point: Point): TreeBlock {
    const { kernel, d, inputs, state } = this;
    const { raw } = kernel;
    this.planLeaf(leaf);
    const limbs = raw.windowLimbs(this.window);
    const z = this.constants;
    raw.treeInterleave(state, limbs, d, inputs, point.top, point.stride, z.top, z.stride, point.limbs);
    raw.windowStart(this.window, state, limbs);
    const rows = this.count(leaf);
    const made = raw.windowAdvance(this.window, rows, this.out);
    if (made !== rows) throw new Error(`a leaf of ${rows} moves ended after ${made}`);
    const first = leaf * this.leafMoves;
    const positions = kernel.u64(this.out, rows * d * this.words);
    if (rows > 0) this.checkJoint(leaf, positions);
    raw.windowEmit(this.window, this.joint);
    this.jointLeaf = leaf + 1;
    return { first, rows, positions };
  }

  /**
   * Where the leaf before ended and where this one begins are two computations of one
   * position, the one by moves, the other by products from above: they must agree.
   */
  private checkJoint(leaf: number, positions: BigUint64Array): void {
    if (this.jointLeaf !== leaf) return;
    const { d, words } = this;
    const end = this.kernel.u64(this.joint, d * words);
    for (let j = 0; j < d; j++) {
      let off = 0n;
      for (let w = j * words; w < (j + 1) * words; w++) off = (off << 64n) + (positions[w]! - end[w]!);
      off = BigInt.asIntN(64 * words, off);
      if (off < -1n || off > 1n) {
        throw new Error(`the walk's two ways to position ${leaf * this.leafMoves} disagree: no result is given`);
      }
    }
  }

  /** Forms a span's product; its entries go to `to`, on the integer stack. */
  private *build(span: Span, to: number): Generator<TreeBlock, Built, void> {
    if (span.halves === undefined) {
      this.workDone += this.work.buildLeaf();
      return this.buildLeaf(span, to);
    }
    const [left, right] = span.halves;
    const l = yield* this.build(left, to);
    const bytes = this.entryBytes(l.limbs);
    if (keepsTransforms(span, this.keep)) {
      const transforms = this.transform(span, l);
      const r = yield* this.build(right, to + bytes);
      const product = this.multiply(transforms, l, r, to);
      this.workDone += this.work.multiply(span);
      yield PAUSE;
      return { ...product, halves: [l, r], left: transforms };
    }
    const { kernel } = this;
    const copy = kernel.alloc(bytes, "a product of moves");
    kernel.u8(copy, bytes).set(kernel.u8(l.entries, bytes));
    const r = yield* this.build(right, to + bytes);
    const product = kernel.scoped(() => this.multiply(this.transform(span, l, false), l, r, to));
    this.workDone += this.work.multiply(span);
    yield PAUSE;
    return { ...product, halves: [l, r], left: { entries: copy, limbs: l.limbs, bits: l.bits } };
  }

  /**
   * Decides which transforms are kept, and takes the walk's memory at once (a page fault
   * costs more than the arithmetic on the page).
   * @throws LimitError where even the most frugal walk would pass the limit
   */
  private planMemory(): void {
    const { d, inputs, kernel } = this;
    const limbs = (span: Span) => Math.ceil((span.size + 66) / 64) + 1;
    const count = d * inputs;
    // Each block is aligned, and its end too.
    const rounded = (bytes: number) => bytes + 128;
    const halves = (span: Span) => span.halves as readonly [Span, Span];
    const transform = (span: Span) => 16 * this.shape(span).length;
    const costs = {
      point: (span: Span) => rounded(8 * limbsFor(span) * d),
      entries: (span: Span) => rounded(this.entryBytes(limbs(span))),
      transforms: (span: Span) => rounded(transform(span) * count) + rounded(NOTE_BYTES * count),
      multiply: (span: Span) =>
        rounded(transform(span) * d) +
        rounded(NOTE_BYTES * d) +
        rounded(transform(span)) +
        rounded(this.entryBytes(limbs(halves(span)[0]) + limbs(halves(span)[1]))),
      apply: (span: Span) =>
        rounded(transform(span) * inputs) + rounded(NOTE_BYTES * inputs) + rounded(transform(span)),
    };
    this.keep = this.leaves;
    let bytes = treeMemory(this.root, this.keep, costs);
    while (bytes > this.comfort && this.keep > 1) {
      this.keep = Math.ceil(this.keep / 2);
      bytes = treeMemory(this.root, this.keep, costs);
    }
    kernel.scoped(() => kernel.alloc(bytes, `an exact walk of ${this.steps} moves`));
  }

  private buildLeaf(span: Span, to: number): Built {
    const { kernel, d, inputs, state } = this;
    const { raw } = kernel;
    this.planLeaf(span.from);
    const limbs32 = Math.ceil((span.size + 2) / 32);
    const limbs = Math.ceil(limbs32 / 2);
    const length = limbs32 * inputs;
    for (let c = 0; c < inputs; c++) {
      const vector = kernel.u32(state, length);
      vector.fill(0);
      vector[c] = 1;
      raw.windowCarry(this.window, state, state + 4 * length);
      raw.treeColumn(to + 8 * limbs * c, 8 * limbs * inputs, limbs, state, limbs32, d, inputs);
    }
    return { entries: to, limbs, bits: raw.treeBits(to, d * inputs, limbs) };
  }

  private entryBytes(limbs: number): number {
    return 8 * limbs * this.d * this.inputs;
  }

  /** A path of the tree holds at most one finished node a level beside the one in hand. */
  private integerBytes(): number {
    let bytes = 0;
    for (let span: Span | undefined = this.root; span !== undefined; span = span.halves?.[0]) {
      bytes += 2 * this.entryBytes(Math.ceil((span.size + 66) / 64) + 1);
    }
    return bytes;
  }

  /** Length and digit width of a span's transforms: the widest digits that the a-priori bound allows. */
  private shape(span: Span): Shape {
    const known = this.shapes.get(span);
    if (known !== undefined) return known;
    const shape = this.findShape(span);
    this.shapes.set(span, shape);
    return shape;
  }

  private findShape(span: Span): Shape {
    const { raw } = this.kernel;
    const bits = 64 * limbsFor(span);
    const [left] = span.halves as readonly [Span, Span];
    for (const width of WIDTHS) {
      const length = raw.lengthFor(Math.ceil(bits / width / 2) + 1) >>> 0;
      // Largest digits, both operands' numbers of digits, one term a component.
      const digits = Math.sqrt((bits / width + 2) * ((left.size + 66) / width + 2));
      const terms = this.inputs;
      if (raw.errorFactor(length, terms) * terms * 4 ** (width - 1) * digits < ERROR_LIMIT) return { length, width };
    }
    throw new LimitError(`a product of ${bits} bits is beyond the transform's proved range`);
  }

  /** Makes every plan of the walk, below all that is released; the longest of a family first, for its tables. */
  private makePlans(): void {
    const { raw } = this.kernel;
    const lengths = new Set<number>();
    const collect = (span: Span): void => {
      if (span.halves === undefined) return;
      lengths.add(this.shape(span).length);
      for (const half of span.halves) collect(half);
    };
    collect(this.root);
    const families = new Map<number, number>();
    for (const length of [...lengths].sort((a, b) => b - a)) {
      this.kernel.require(raw.planBytes(length) >>> 0, "the transforms' tables");
      const family = raw.planFamily(length);
      const plan = raw.makePlan(length, families.get(family) ?? 0) >>> 0;
      if (plan === 0) throw new LimitError(`a transform of length ${length} is beyond what can be checked or held`);
      if (!families.has(family)) families.set(family, plan);
      this.plans.set(length, plan);
    }
  }

  /** The transforms of a left half's entries, kept on the arena; noted where they are to move a point. */
  private transform(span: Span, left: Entries, noted = true): Transforms {
    const { kernel, d, inputs } = this;
    const { length, width } = this.shape(span);
    const plan = this.plans.get(length) as number;
    const count = d * inputs;
    const at = kernel.alloc(16 * length * count, "the transforms of a product");
    const notes = kernel.alloc(NOTE_BYTES * count, "the transforms of a product");
    kernel.raw.treeTransform(plan, at, notes, left.entries, 8 * left.limbs, count, left.limbs, width, noted);
    return { plan, length, width, at, notes, bits: left.bits };
  }

  /** The product (right half) (left half), packed to `to`. */
  private multiply(transforms: Transforms, left: Built, right: Built, to: number): Entries {
    const { kernel, d, inputs } = this;
    const { raw } = kernel;
    const { plan, length, width, at, notes } = transforms;
    const limbs = Math.ceil((transforms.bits + right.bits + 8) / 64);
    const entry = 8 * limbs;
    return kernel.scoped(() => {
      const row = kernel.alloc(16 * length * d, "a row of transforms");
      const rowNotes = kernel.alloc(NOTE_BYTES * d, "a row of transforms");
      const work = kernel.alloc(16 * length, "a row of transforms");
      const out = kernel.alloc(entry * d * inputs, "a product of moves");
      for (let i = 0; i < d; i++) {
        const from = right.entries + 8 * right.limbs * inputs * i;
        raw.treeTransform(plan, row, rowNotes, from, 8 * right.limbs, d, right.limbs, width, false);
        const into = out + entry * inputs * i;
        this.check(raw.treeRow(plan, row, rowNotes, at, notes, d, inputs, work, into, entry, limbs, 0, width, false));
        for (let c = d; c < inputs; c++) {
          raw.treeAdd(into + entry * c, limbs, from + 8 * right.limbs * c, right.limbs);
        }
      }
      this.check(raw.treeCheck(out, limbs, right.entries, right.limbs, left.entries, left.limbs, d, inputs));
      const bits = raw.treeBits(out, d * inputs, limbs);
      const fewer = Math.ceil(bits / 64);
      raw.treePack(to, fewer, out, limbs, d * inputs);
      return { entries: to, limbs: fewer, bits };
    });
  }

  /**
   * Moves a point by a left half's product, to d fractions at `to`.
   * @returns low limbs of the result that carry no right bit
   */
  private apply(transforms: Transforms, point: Point, to: number, stride: number): number {
    const { kernel, d, inputs, constants } = this;
    const { raw } = kernel;
    const { plan, length, width, at, notes } = transforms;
    const limbs = point.limbs;
    // Carries from digits that are not read stay 11 bits below what the cut of the point has spoilt.
    const lost = Math.max(0, Math.floor((transforms.bits - 50) / 64));
    kernel.scoped(() => {
      const column = kernel.alloc(16 * length * inputs, "a point's transforms");
      const columnNotes = kernel.alloc(NOTE_BYTES * inputs, "a point's transforms");
      const work = kernel.alloc(16 * length, "a point's transforms");
      const bottom = (p: Point) => p.top - 8 * limbs;
      raw.treeTransform(plan, column, columnNotes, bottom(point), point.stride, d, limbs, width, true);
      const more = column + 16 * length * d;
      const moreNotes = columnNotes + NOTE_BYTES * d;
      raw.treeTransform(plan, more, moreNotes, bottom(constants), constants.stride, inputs - d, limbs, width, true);
      for (let i = 0; i < d; i++) {
        const row = at + 16 * length * inputs * i;
        const rowNotes = notes + NOTE_BYTES * inputs * i;
        const into = to + stride * i;
        this.check(
          raw.treeRow(
            plan,
            row,
            rowNotes,
            column,
            columnNotes,
            inputs,
            1,
            work,
            into,
            stride,
            limbs,
            lost,
            width,
            true,
          ),
        );
      }
    });
    return lost;
  }

  private check(status: number): void {
    if (status !== 0) {
      throw new Error("a big product failed its check modulo a prime: its result was not used");
    }
  }
}

/** 64-bit limbs of a point at a span's first move. */
function limbsFor(span: Span): number {
  return Math.ceil((span.need + 1) / 64);
}

/** The point's top limbs. */
function cut(point: Point, limbs: number): Point {
  return point.limbs <= limbs ? point : { ...point, limbs };
}

function rowNorm(entries: Float64Array, inputs: number): number {
  let norm = 0;
  for (let i = 0; i < entries.length; i += inputs) {
    let sum = 0;
    for (let j = 0; j < inputs; j++) sum += Math.abs(entries[i + j]!);
    norm = Math.max(norm, sum);
  }
  return norm;
}

/** right left in doubles; the radius as in windowProduct (assembly/trajectory/rough.ts). */
function multiplyRough(right: Rough, left: Rough, d: number, inputs: number): Rough {
  const unit = (d + 4) * 2 ** -53;
  const shrink = 2 ** -left.exponent; // what right's constants' columns are scaled by
  const entries = new Float64Array(d * inputs);
  for (let i = 0; i < d; i++) {
    for (let j = 0; j < inputs; j++) {
      let x = j < d ? 0 : right.entries[i * inputs + j]! * shrink;
      for (let k = 0; k < d; k++) x += right.entries[i * inputs + k]! * left.entries[k * inputs + j]!;
      entries[i * inputs + j] = x;
    }
  }
  const exponent = right.exponent + left.exponent;
  const a = right.norm + right.radius;
  const b = left.norm + left.radius + shrink;
  const radius = (right.radius * b + a * left.radius + unit * a * b) * (1 + 4 * unit);
  const norm = rowNorm(entries, inputs);
  if (norm + radius < 2 ** 256) return { entries, norm, exponent, radius };
  const down = 2 ** -256;
  return { entries: entries.map((x) => x * down), norm: norm * down, exponent: exponent + 256, radius: radius * down };
}

/** Moves of a leaf, from the largest move: products of some LEAF_BITS bits. */
function defaultLeaf(table: WindowTable): number {
  const largest = table.norms.reduce((a, b) => Math.max(a, b), 2);
  return Math.max(16, Math.min(2048, Math.round(LEAF_BITS / exponentAbove(largest))));
}
