/*
 * The dual walk of four shears on frequencies up to sign, coefficients in double precision: a
 * table of 64-bit pairs in absl::flat_hash_map (Abseil, its own hash) or tsl::hopscotch_map
 * (with the same mixing of bits as the kernel's), reserved in advance and used again.
 * Arguments: input (unused), "absl" or "hopscotch", steps, repeats.
 * Prints median milliseconds, and a word: the final number of frequencies, and twice the sum of squares in units of 10^-9.
 */
extern "C" {
#include "common.h"
}
#include <absl/container/flat_hash_map.h>
#include <tsl/hopscotch_map.h>
#include <cmath>
#include <utility>

struct Key {
  int64_t a, b;
  bool operator==(const Key &o) const { return a == o.a && b == o.b; }
  template <typename H> friend H AbslHashValue(H h, const Key &k) { return H::combine(std::move(h), k.a, k.b); }
};

struct Mix {
  size_t operator()(const Key &k) const {
    uint64_t y = (uint64_t)k.b * 0xc2b2ae3d27d4eb4full;
    uint64_t h = (uint64_t)k.a * 0x9e3779b97f4a7c15ull + (y << 31 | y >> 33);
    h ^= h >> 32;
    h *= 0x9fb21c651e98df25ull;
    h ^= h >> 29;
    h *= 0xd6e8feb86659fd93ull;
    return h ^ (h >> 32);
  }
};

static const int64_t SHEARS[4][4] = {{1, 2, 0, 1}, {1, -2, 0, 1}, {1, 0, 2, 1}, {1, 0, -2, 1}};

template <typename Map> static void run(int steps, int repeats) {
  Map from, to;
  double times[64], sum = 0;
  size_t count = 0;
  for (int r = 0; r <= repeats; r++) {
    double start = now_ms();
    from.clear();
    from[Key{1, 0}] = 0.5;
    for (int n = 0; n < steps; n++) {
      to.clear();
      to.reserve(4 * from.size());
      for (const auto &entry : from) {
        for (const auto &m : SHEARS) {
          Key k{m[0] * entry.first.a + m[1] * entry.first.b, m[2] * entry.first.a + m[3] * entry.first.b};
          if (k.a < 0 || (k.a == 0 && k.b < 0)) k = Key{-k.a, -k.b};
          to[k] += 0.25 * entry.second;
        }
      }
      std::swap(from, to);
    }
    sum = 0;
    for (const auto &entry : from) sum += 2 * entry.second * entry.second;
    count = from.size();
    if (r > 0) times[r - 1] = now_ms() - start;
  }
  printf("%.6f %016lx\n", median(times, repeats), (unsigned long)count << 32 | (uint32_t)llround(1e9 * sum));
}

int main(int argc, char **argv) {
  int steps = atoi(argv[3]), repeats = atoi(argv[4]);
  if (argc > 2 && strcmp(argv[2], "absl") == 0) run<absl::flat_hash_map<Key, double>>(steps, repeats);
  else run<tsl::hopscotch_map<Key, double, Mix>>(steps, repeats);
}
