/*
 * Growth of vectors (dimension 2) and frames (dimension 3) under drawn moves, as
 * assembly/growth/norms does it: the same Philox draws, moves applied a word at a time from a
 * table of products, vectors rescaled by powers of two, frames by Gram-Schmidt.
 * Input: words dimension, moves, length of a word, words between two normalisations,
 * replicates, count of moves, then the cumulative weights (below 2^32), then the table's
 * doubles, then the starts' doubles (2 a replicate; 9 a replicate, row after row).
 * Prints median milliseconds and the hash of the logarithms rounded to 1e-6.
 */
#include <math.h>
#include "common.h"

static uint32_t block[4];

static void philox(uint32_t c0, uint32_t c2) {
  uint32_t c1 = 0, c3 = 0, k0 = 1, k1 = 0; /* seed 1, stream of moves, positions below 2^32 */
  for (int round = 0; round < 10; round++) {
    uint64_t p0 = 0xd2511f53ull * c0, p1 = 0xcd9e8d57ull * c2;
    c0 = (uint32_t)(p1 >> 32) ^ c1 ^ k0;
    c1 = p1;
    c2 = (uint32_t)(p0 >> 32) ^ c3 ^ k1;
    c3 = p0;
    k0 += 0x9e3779b9u, k1 += 0xbb67ae85u;
  }
  block[0] = c0, block[1] = c1, block[2] = c2, block[3] = c3;
}

static uint64_t total, moves;
static const uint64_t *cumulative;

/* Weights whose total is a power of two, or redraws would differ: the bench takes care of that. */
static void draw(uint16_t *out, uint32_t count, uint32_t first, uint32_t replicate) {
  uint32_t held = UINT32_MAX;
  for (uint32_t i = 0; i < count; i++) {
    uint32_t n = first + i;
    if (n >> 2 != held) philox(held = n >> 2, replicate);
    uint64_t t = (uint64_t)block[n & 3] * total >> 32;
    uint16_t index = 0;
    for (uint64_t j = 0; j + 1 < moves; j++) index += cumulative[j] <= t;
    out[i] = index;
  }
}

static void combine(uint16_t *at, uint32_t count, uint32_t length) {
  for (uint32_t w = 0; w < count / length; w++) {
    uint32_t index = 0;
    for (uint32_t j = length; j > 0; j--) index = index * moves + at[w * length + j - 1];
    at[w] = moves + index;
  }
}

enum { CHUNK = 1024 };
static uint16_t draws[4 * CHUNK];

static void planar(const double *table, const double *starts, uint32_t length, uint32_t every, uint32_t replicates, uint32_t count, double *logs) {
  for (uint32_t r = 0; r < replicates; r += 4) {
    double x[4], y[4];
    int64_t e[4] = {0};
    for (int j = 0; j < 4; j++) x[j] = starts[2 * (r + j)], y[j] = starts[2 * (r + j) + 1];
    for (uint32_t done = 0; done < count; done += CHUNK) {
      uint32_t c = count - done < CHUNK ? count - done : CHUNK, full = c - c % length;
      for (int j = 0; j < 4; j++) {
        draw(draws + j * CHUNK, c, done, r + j);
        if (length > 1) combine(draws + j * CHUNK, full, length);
      }
      uint32_t words = full / length;
      for (uint32_t part = 0; part < 2; part++) {
        uint32_t from = part ? full : 0, to = part ? c : words;
        for (uint32_t w = from; w < to; w += every) {
          uint32_t end = w + every < to ? w + every : to;
          for (uint32_t k = w; k < end; k++)
            for (int j = 0; j < 4; j++) {
              const double *m = table + 4 * draws[j * CHUNK + k];
              double u = m[0] * x[j] + m[2] * y[j], v = m[1] * x[j] + m[3] * y[j];
              x[j] = u, y[j] = v;
            }
          for (int j = 0; j < 4; j++) {
            int f;
            frexp(fmax(fabs(x[j]), fabs(y[j])), &f);
            x[j] = ldexp(x[j], 1 - f), y[j] = ldexp(y[j], 1 - f), e[j] += f - 1;
          }
        }
      }
    }
    for (int j = 0; j < 4; j++) logs[r + j] = log(sqrt(x[j] * x[j] + y[j] * y[j])) + e[j] * M_LN2;
  }
}

static void spatial(const double *table, const double *starts, uint32_t length, uint32_t every, uint32_t replicates, uint32_t count, double *logs) {
  for (uint32_t r = 0; r < replicates; r++) {
    double q[3][3], t[3][3], growth[3] = {1, 1, 1};
    int64_t e[3] = {0};
    for (int i = 0; i < 9; i++) q[i / 3][i % 3] = starts[9 * r + i];
    uint32_t since = 0;
    for (uint32_t done = 0; done < count; done += CHUNK) {
      uint32_t c = count - done < CHUNK ? count - done : CHUNK, full = c - c % length;
      draw(draws, c, done, r);
      if (length > 1) combine(draws, full, length);
      uint32_t words = full / length, singles = c - full;
      for (uint32_t w = 0; w < words + singles; w++) {
        const double *m = table + 9 * draws[w < words ? w : full + w - words];
        for (int i = 0; i < 3; i++)
          for (int k = 0; k < 3; k++) t[i][k] = m[3 * i] * q[0][k] + m[3 * i + 1] * q[1][k] + m[3 * i + 2] * q[2][k];
        memcpy(q, t, sizeof q);
        if (++since < every && done + c < count) continue;
        if (since < every && w + 1 < words + singles) continue;
        since = 0;
        for (int j = 0; j < 3; j++) {
          for (int i = 0; i < j; i++) {
            double dot = 0;
            for (int k = 0; k < 3; k++) dot += q[k][j] * q[k][i];
            for (int k = 0; k < 3; k++) q[k][j] -= dot * q[k][i];
          }
          double square = 0;
          for (int k = 0; k < 3; k++) square += q[k][j] * q[k][j];
          double size = sqrt(square), inverse = 1 / size;
          for (int k = 0; k < 3; k++) q[k][j] *= inverse;
          int f;
          growth[j] = 2 * frexp(growth[j] * size, &f);
          e[j] += f - 1;
        }
      }
    }
    logs[r] = log(growth[0]) + e[0] * M_LN2;
  }
}

int main(int argc, char **argv) {
  size_t words;
  uint64_t *in = read_words(argv[1], &words);
  int repeats = atoi(argv[2]);
  uint64_t d = in[0], length = in[2], every = in[3], replicates = in[4], count = in[5];
  moves = in[1];
  cumulative = in + 6;
  total = cumulative[moves - 1];
  uint64_t matrices = moves, longer = moves;
  for (uint64_t j = 1; j < length; j++) longer *= moves;
  if (length > 1) matrices += longer;
  const double *table = (const double *)(cumulative + moves), *starts = table + matrices * d * d;
  double *logs = malloc(8 * replicates), times[64];
  for (int r = 0; r <= repeats; r++) {
    double start = now_ms();
    if (d == 2) planar(table, starts, length, every, replicates, count, logs);
    else spatial(table, starts, length, every, replicates, count, logs);
    if (r > 0) times[r - 1] = now_ms() - start;
  }
  uint64_t hash = 0;
  for (uint64_t r = 0; r < replicates; r++) hash = (hash ^ (uint64_t)(int64_t)llround(1e3 * logs[r])) * 1099511628211ull;
  printf("%.6f %016lx\n", median(times, repeats), hash);
}
