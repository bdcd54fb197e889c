/*
 * All positions of a long walk by divide and conquer over the moves, on libgmp: products of
 * all nodes from the leaves up (the root's is not formed), then the point is walked down,
 * cut to the bits that each node needs.
 * Input: words n, limbs, then the choices (a word each), then x and y, `limbs` words each.
 * Prints the median time in milliseconds after one run to warm up, and the positions' hash.
 */
#include <gmp.h>
#include <math.h>
#include "common.h"

enum { LEAF = 64 };

typedef struct {
  mpz_t e[4];
  double bits;
} Product;

static size_t n, leaves;
static int levels;
static unsigned char *choices;
static Product **tree;
static uint64_t *out;

static double bits_of(Product *p) {
  double most = 0;
  for (int i = 0; i < 4; i++) most = fmax(most, mpz_sizeinbase(p->e[i], 2));
  return most + 1;
}

static void leaf_product(size_t from, size_t to, Product *p) {
  mpz_t u, v;
  mpz_inits(u, v, NULL);
  for (int i = 0; i < 4; i++) mpz_set_ui(p->e[i], i == 0 || i == 3);
  for (size_t k = from; k < to; k++) {
    const long *m = MOVES[choices[k]];
    for (int j = 0; j < 2; j++) {
      mpz_mul_si(u, p->e[j], m[0]);
      mpz_addmul_ui(u, p->e[2 + j], m[1]);
      mpz_mul_si(v, p->e[j], m[2]);
      mpz_addmul_ui(v, p->e[2 + j], m[3]);
      mpz_swap(p->e[j], u);
      mpz_swap(p->e[2 + j], v);
    }
  }
  mpz_clears(u, v, NULL);
}

static size_t width(int level) { return (leaves + ((size_t)1 << level) - 1) >> level; }

static void build(void) {
  tree = malloc((levels + 1) * sizeof(Product *));
  mpz_t t;
  mpz_init(t);
  for (int level = 0; level <= levels; level++) {
    size_t count = width(level);
    tree[level] = malloc(count * sizeof(Product));
    for (size_t i = 0; i < count; i++) {
      Product *p = &tree[level][i];
      for (int j = 0; j < 4; j++) mpz_init(p->e[j]);
      if (level == 0) {
        size_t to = (i + 1) * LEAF < n ? (i + 1) * LEAF : n;
        leaf_product(i * LEAF, to, p);
        p->bits = bits_of(p);
        continue;
      }
      Product *a = &tree[level - 1][2 * i], *b = a + 1;
      if (i + 1 == count) { /* the last of a level is never a left half: its product is not asked for */
        p->bits = a->bits + (2 * i + 1 < width(level - 1) ? b->bits : 0);
        continue;
      }
      for (int r = 0; r < 2; r++)
        for (int c = 0; c < 2; c++) {
          mpz_mul(p->e[2 * r + c], b->e[2 * r], a->e[c]);
          mpz_mul(t, b->e[2 * r + 1], a->e[2 + c]);
          mpz_add(p->e[2 * r + c], p->e[2 * r + c], t);
        }
      p->bits = bits_of(p);
    }
  }
  mpz_clear(t);
}

static void free_tree(void) {
  for (int level = 0; level <= levels; level++) {
    for (size_t i = 0; i < width(level); i++)
      for (int j = 0; j < 4; j++) mpz_clear(tree[level][i].e[j]);
    free(tree[level]);
  }
  free(tree);
}

static void walk_leaf(mpz_t x, mpz_t y, long bits, size_t from, size_t to) {
  enum { MOST = 24 };
  long limbs = (bits + 63) / 64;
  mp_limb_t u[MOST] = {0}, v[MOST] = {0}, s[MOST], t[MOST];
  size_t count;
  mpz_t z;
  mpz_init(z);
  mpz_mul_2exp(z, x, 64 * limbs - bits);
  mpz_export(u, &count, -1, 8, 0, 0, z);
  mpz_mul_2exp(z, y, 64 * limbs - bits);
  mpz_export(v, &count, -1, 8, 0, 0, z);
  mpz_clear(z);
  for (size_t k = from; k < to; k++) {
    out[2 * k] = u[limbs - 1];
    out[2 * k + 1] = v[limbs - 1];
    const long *m = MOVES[choices[k]];
    mpn_mul_1(s, u, limbs, m[0]);
    mpn_addmul_1(s, v, limbs, m[1]);
    mpn_mul_1(t, u, limbs, m[2]);
    mpn_addmul_1(t, v, limbs, m[3]);
    memcpy(u, s, 8 * limbs);
    memcpy(v, t, 8 * limbs);
  }
}

static void walk(mpz_t x, mpz_t y, long bits, int level, size_t i) {
  size_t span = (size_t)LEAF << level, from = i * span, to = from + span < n ? from + span : n;
  long want = (long)ceil(tree[level][i].bits) + 130;
  mpz_t u, v;
  mpz_inits(u, v, NULL);
  if (bits > want) {
    mpz_fdiv_q_2exp(u, x, bits - want);
    mpz_fdiv_q_2exp(v, y, bits - want);
    bits = want;
  } else {
    mpz_set(u, x);
    mpz_set(v, y);
  }
  if (level == 0) walk_leaf(u, v, bits, from, to);
  else {
    walk(u, v, bits, level - 1, 2 * i);
    if (from + span / 2 < n) {
      Product *p = &tree[level - 1][2 * i];
      mpz_t r, s, t;
      mpz_inits(r, s, t, NULL);
      mpz_mul(r, p->e[0], u);
      mpz_mul(t, p->e[1], v);
      mpz_add(r, r, t);
      mpz_fdiv_r_2exp(r, r, bits);
      mpz_mul(s, p->e[2], u);
      mpz_mul(t, p->e[3], v);
      mpz_add(s, s, t);
      mpz_fdiv_r_2exp(s, s, bits);
      walk(r, s, bits, level - 1, 2 * i + 1);
      mpz_clears(r, s, t, NULL);
    }
  }
  mpz_clears(u, v, NULL);
}

int main(int argc, char **argv) {
  size_t count;
  uint64_t *in = read_words(argv[1], &count);
  int repeats = argc > 2 ? atoi(argv[2]) : 5;
  n = in[0];
  size_t limbs = in[1];
  choices = malloc(n);
  for (size_t i = 0; i < n; i++) choices[i] = in[2 + i];
  const uint64_t *x0 = in + 2 + n, *y0 = x0 + limbs;
  out = malloc(16 * n);
  leaves = (n + LEAF - 1) / LEAF;
  while (((size_t)1 << levels) < leaves) levels++;
  double times[64];
  for (int r = 0; r <= repeats; r++) {
    double start = now_ms();
    build();
    mpz_t x, y;
    mpz_inits(x, y, NULL);
    mpz_import(x, limbs, -1, 8, 0, 0, x0);
    mpz_import(y, limbs, -1, 8, 0, 0, y0);
    walk(x, y, 64 * limbs, levels, 0);
    mpz_clears(x, y, NULL);
    free_tree();
    /* The first run warms up, unless there is no other. */
    if (r > 0 || repeats == 0) times[r > 0 ? r - 1 : 0] = now_ms() - start;
  }
  printf("%.6f %016lx\n", median(times, repeats > 0 ? repeats : 1), hash_words(0, out, 2 * n));
}
