/*
 * All positions of many short walks from one start: move by move on libgmp's mpn functions,
 * or the batches of assembly/trajectory in C (moves multiplied up to row sums of 2^30, the
 * positions inside a batch from the top 96 bits, one pass with the product over 32-bit limbs).
 * Input: words moves, replicates, limbs, then the choices (a byte each, padded to a word),
 * then x and y, `limbs` words each.
 * Arguments: input, "moves" or "batches", repeats. Prints median milliseconds and the hash.
 */
#include <gmp.h>
#include "common.h"

static size_t n, limbs;

/* Bits that a move consumes at most, in the mean of long walks: 1.6494 (lambda_1 / ln 2), and room. */
static const double BITS = 1.68;

static void by_moves(const unsigned char *choices, const uint64_t *x0, const uint64_t *y0, uint64_t *out, mp_limb_t *work) {
  mp_limb_t *x = work, *y = x + limbs, *s = y + limbs, *t = s + limbs;
  memcpy(x, x0, 8 * limbs);
  memcpy(y, y0, 8 * limbs);
  size_t low = 0;
  double need = n * BITS + 128;
  for (size_t k = 0; k < n; k++) {
    out[2 * k] = x[limbs - 1];
    out[2 * k + 1] = y[limbs - 1];
    const long *m = MOVES[choices[k]];
    size_t count = limbs - low;
    mpn_mul_1(s + low, x + low, count, m[0]);
    mpn_addmul_1(s + low, y + low, count, m[1]);
    mpn_mul_1(t + low, x + low, count, m[2]);
    mpn_addmul_1(t + low, y + low, count, m[3]);
    mp_limb_t *spare = x;
    x = s, s = spare;
    spare = y;
    y = t, t = spare;
    need -= BITS;
    size_t want = (size_t)(need / 64) + 1;
    if (want < 2) want = 2;
    if (limbs - low > want) low = limbs - want;
  }
}

typedef struct {
  int64_t p, q, r, s;
  size_t length;
  double need;
} Batch;

static void by_batches(const unsigned char *choices, const uint64_t *x0, const uint64_t *y0, uint64_t *out, uint32_t *work, Batch *batches) {
  size_t count = 0;
  for (size_t k = 0; k < n; count++) {
    const long *f = MOVES[choices[k]];
    int64_t p = f[0], q = f[1], r = f[2], s = f[3], norm = 0;
    size_t first = k++;
    while (k < n && k - first < 256) {
      const long *m = MOVES[choices[k]];
      int64_t np = m[0] * p + m[1] * r, nq = m[0] * q + m[1] * s, nr = m[2] * p + m[3] * r, ns = m[2] * q + m[3] * s;
      int64_t top = llabs(np) + llabs(nq), low = llabs(nr) + llabs(ns), longer = top > low ? top : low;
      if (longer > 1 << 30) break;
      p = np, q = nq, r = nr, s = ns, norm = longer, k++;
    }
    int bits = 64 - __builtin_clzll(norm | 1);
    batches[count] = (Batch){p, q, r, s, k - first, bits};
  }
  double need = 0;
  for (size_t i = count; i-- > 0;) need = batches[i].need += need;
  size_t small = 2 * limbs;
  /* Interleaved 32-bit limbs, the top one last. */
  for (size_t i = 0; i < limbs; i++) {
    work[4 * i] = x0[i], work[4 * i + 1] = y0[i];
    work[4 * i + 2] = x0[i] >> 32, work[4 * i + 3] = y0[i] >> 32;
  }
  uint32_t *high = work + 2 * small;
  const unsigned char *c = choices;
  for (size_t i = 0; i < count; i++) {
    const Batch b = batches[i];
    size_t want = (size_t)((b.need + 64 + 14) / 32) + 1;
    uint32_t *low = high - 2 * (want < small ? want : small);
    int64_t a0 = high[-6], d0 = high[-5], a1 = high[-4], d1 = high[-3], a2 = high[-2], d2 = high[-1];
    for (size_t k = 0;;) {
      *out++ = (uint64_t)a2 << 32 | a1;
      *out++ = (uint64_t)d2 << 32 | d1;
      if (++k == b.length) break;
      const long *m = MOVES[*c++];
      int64_t u = m[0] * a0 + m[1] * d0, v = m[2] * a0 + m[3] * d0;
      a0 = u & 0xffffffff, d0 = v & 0xffffffff;
      u = m[0] * a1 + m[1] * d1 + (u >> 32), v = m[2] * a1 + m[3] * d1 + (v >> 32);
      a1 = u & 0xffffffff, d1 = v & 0xffffffff;
      u = m[0] * a2 + m[1] * d2 + (u >> 32), v = m[2] * a2 + m[3] * d2 + (v >> 32);
      a2 = u & 0xffffffff, d2 = v & 0xffffffff;
    }
    c++;
    int64_t u = 0, v = 0;
    for (uint32_t *l = low; l < high; l += 2) {
      int64_t x = l[0], y = l[1];
      u += b.p * x + b.q * y, v += b.r * x + b.s * y;
      l[0] = u, l[1] = v;
      u >>= 32, v >>= 32;
    }
  }
}

int main(int argc, char **argv) {
  size_t count;
  uint64_t *in = read_words(argv[1], &count);
  int batched = strcmp(argv[2], "batches") == 0, repeats = atoi(argv[3]);
  n = in[0];
  size_t replicates = in[1];
  limbs = in[2];
  const unsigned char *choices = (const unsigned char *)(in + 3);
  const uint64_t *x0 = in + 3 + (n * replicates + 7) / 8, *y0 = x0 + limbs;
  uint64_t *out = malloc(16 * n);
  void *work = malloc(64 * limbs);
  Batch *batches = malloc(n * sizeof(Batch));
  double times[64];
  uint64_t hash = 0;
  for (int r = 0; r <= repeats; r++) {
    hash = 0;
    double start = now_ms();
    for (size_t i = 0; i < replicates; i++) {
      if (batched) by_batches(choices + i * n, x0, y0, out, work, batches);
      else by_moves(choices + i * n, x0, y0, out, work);
      hash = hash_words(hash, out + 2 * n - 2, 2);
    }
    if (r > 0) times[r - 1] = now_ms() - start;
  }
  printf("%.6f %016lx\n", median(times, repeats), hash);
}
