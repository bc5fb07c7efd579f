/* The product's random numbers in C: xoshiro128++ (Blackman & Vigna 2021), one state per replicate, the same draws in the same order. */
#ifndef MOORAGE_STREAM_H
#define MOORAGE_STREAM_H
#include <stdint.h>

typedef struct { uint32_t a, b, c, d; } stream;

static inline uint32_t turn(uint32_t word, int by) { return word << by | word >> (32 - by); }

static inline uint32_t next(stream *s) {
  const uint32_t result = turn(s->a + s->d, 7) + s->a, shifted = s->b << 9;
  s->c ^= s->a;
  s->d ^= s->b;
  s->b ^= s->c;
  s->a ^= s->d;
  s->c ^= shifted;
  s->d = turn(s->d, 11);
  return result;
}

static inline uint64_t mixed(uint64_t z) {
  z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9ull;
  z = (z ^ (z >> 27)) * 0x94D049BB133111EBull;
  return z ^ (z >> 31);
}

static inline stream stream_of(uint32_t low, uint32_t high, uint32_t replicate) {
  const uint64_t h = (uint64_t)high << 32 | low;
  const uint64_t x = h ^ ((uint64_t)replicate * 0xD1342543DE82EF95ull + 0x632BE59BD9B4E019ull);
  const uint64_t first = mixed(x + 0x9E3779B97F4A7C15ull), second = mixed(x + 0x3C6EF372FE94F82Aull);
  stream s = { (uint32_t)first, (uint32_t)(first >> 32), (uint32_t)second, (uint32_t)(second >> 32) };
  if ((s.a | s.b | s.c | s.d) == 0) s.a = 1;
  return s;
}

static inline uint32_t below(stream *s, uint32_t n) { return (uint32_t)((uint64_t)next(s) * n >> 32); }

/* True with probability p, to 2^-64; no draw when p <= 0 or p >= 1. */
static inline int chance(stream *s, double p) {
  if (p >= 1) return 1;
  if (p <= 0) return 0;
  const double scaled = p * 4294967296.0;
  const uint32_t limit = (uint32_t)scaled, r = next(s);
  return r == limit ? next(s) < (uint32_t)((scaled - limit) * 4294967296.0) : r < limit;
}
#endif
