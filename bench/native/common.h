/* What the peers share: the walk's moves, the clock, medians, reading the input, the answers' hash. */
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

/* {[[2,1],[1,1]], [[3,1],[2,1]]} */
static const long MOVES[2][4] = {{2, 1, 1, 1}, {3, 1, 2, 1}};

static double now_ms(void) {
  struct timespec t;
  clock_gettime(CLOCK_MONOTONIC, &t);
  return 1e3 * t.tv_sec + 1e-6 * t.tv_nsec;
}

static int by_size(const void *a, const void *b) {
  double x = *(const double *)a, y = *(const double *)b;
  return x < y ? -1 : x > y;
}

static double median(double *times, int count) {
  qsort(times, count, sizeof(double), by_size);
  return times[count / 2];
}

/* A whole file of 64-bit words. */
static uint64_t *read_words(const char *name, size_t *count) {
  FILE *f = fopen(name, "rb");
  if (!f) exit(1);
  fseek(f, 0, SEEK_END);
  *count = ftell(f) / 8;
  rewind(f);
  uint64_t *words = (uint64_t *)malloc(8 * *count);
  if (fread(words, 8, *count, f) != *count) exit(1);
  fclose(f);
  return words;
}

/* Positions to 40 bits: they are right to more, but their last bits may differ by a unit. */
static uint64_t hash_words(uint64_t hash, const uint64_t *words, size_t count) {
  for (size_t i = 0; i < count; i++) hash = (hash ^ (words[i] >> 24)) * 1099511628211ull;
  return hash;
}
