/* What a run leaves behind, as the product's kernel keeps it, and the loop that answers "FROM TO" lines with time and digest. */
#ifndef MOORAGE_TALLY_H
#define MOORAGE_TALLY_H
#include <string.h>
#include <time.h>
#include "plan.h"

typedef struct {
  int64_t *filled_sum, *filled_sum_sq, *events, *exposure;
  int replicates;
} tally;

static tally new_tally(const plan *p, int replicates) {
  const size_t samples = (size_t)p->classes * p->samples, counts = (size_t)p->classes * replicates;
  tally t = { calloc(samples, 8), calloc(samples, 8), calloc(counts, 8), calloc(counts, 8), replicates };
  return t;
}

static void free_tally(tally *t) {
  free(t->filled_sum);
  free(t->filled_sum_sq);
  free(t->events);
  free(t->exposure);
}

/* FNV-1a over whole numbers, low 32 bits of each. */
static uint32_t fold(uint32_t hash, const int64_t *numbers, size_t count) {
  for (size_t i = 0; i < count; i++) hash = (hash ^ (uint32_t)numbers[i]) * 16777619u;
  return hash;
}

static uint32_t digest(const plan *p, const tally *t) {
  const size_t samples = (size_t)p->classes * p->samples, counts = (size_t)p->classes * t->replicates;
  uint32_t hash = fold(2166136261u, t->filled_sum, samples);
  hash = fold(hash, t->filled_sum_sq, samples);
  hash = fold(hash, t->events, counts);
  return fold(hash, t->exposure, counts);
}

static double now(void) {
  struct timespec t;
  clock_gettime(CLOCK_MONOTONIC, &t);
  return t.tv_sec * 1e3 + t.tv_nsec / 1e6;
}

/* Sites of one replicate. */
typedef struct {
  uint8_t *filled;
  int filled_count[2], total[2], next_sample, replicate;
} sites;

/* Answers each line "FROM TO" with "milliseconds digest" until the input ends. */
static int serve(const plan *p, void (*run)(const plan *, tally *, int from, int to)) {
  int from, to;
  while (scanf("%d %d", &from, &to) == 2) {
    tally t = new_tally(p, to - from);
    const double start = now();
    run(p, &t, from, to);
    const double taken = now() - start;
    printf("%.6f %u\n", taken, digest(p, &t));
    fflush(stdout);
    free_tally(&t);
  }
  return 0;
}
#endif
