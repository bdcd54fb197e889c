/*
 * A walk on numerators modulo q = 10^9 + 7, every numerator written: the remainder as gcc -O3
 * makes it for a divisor known when compiled, and for one that is not.
 * Input: words n, then the choices (a word each). Arguments: input, "known" or "given", repeats.
 */
#include "common.h"

static const int64_t KNOWN = 1000000007;

#define WALK(q)                                                     \
  for (size_t k = 0; k < n; k++) {                                  \
    const long *m = MOVES[choices[k]];                              \
    int64_t u = (m[0] * x + m[1] * y) % (q), v = (m[2] * x + m[3] * y) % (q); \
    x = u, y = v;                                                   \
    out[2 * k] = x, out[2 * k + 1] = y;                             \
  }

__attribute__((noinline)) static void known(size_t n, const uint16_t *choices, int64_t x, int64_t y, int64_t *out) {
  WALK(KNOWN)
}

__attribute__((noinline)) static void given(size_t n, const uint16_t *choices, int64_t x, int64_t y, int64_t *out, int64_t q) {
  WALK(q)
}

int main(int argc, char **argv) {
  size_t count;
  uint64_t *in = read_words(argv[1], &count);
  int repeats = atoi(argv[3]), fixed = strcmp(argv[2], "known") == 0;
  size_t n = in[0];
  uint16_t *choices = malloc(2 * n);
  for (size_t i = 0; i < n; i++) choices[i] = in[1 + i];
  int64_t *out = malloc(16 * n);
  volatile int64_t q = KNOWN;
  double times[64];
  for (int r = 0; r <= repeats; r++) {
    double start = now_ms();
    if (fixed) known(n, choices, 5, 7, out);
    else given(n, choices, 5, 7, out, q);
    if (r > 0) times[r - 1] = now_ms() - start;
  }
  uint64_t hash = 0;
  for (size_t i = 0; i < 2 * n; i++) hash = (hash ^ (uint64_t)out[i]) * 1099511628211ull;
  printf("%.6f %016lx\n", median(times, repeats), hash);
}
