/*
 * Reference: the attempt-to-attempt sampler in C, on the very tables that the product's kernel built (a copy of its memory is the second file).
 * Vesicles of one kind, sites that keep what they attach, no later release, no decline. Same draws in the same order, so that digests are equal.
 * gcc -O3 -march=native -ffp-contract=off -o attempt attempt.c
 */
#include "stream.h"
#include "tally.h"

/* Words of the kernel's argument blocks, in the order of workers/attempt-placing.ts. */
enum { WAITS, WAIT_STEPS, BIN_OF, LANDING_STEPS, ROWS, ROWS_PER_CLASS, CELLS, ORDER, CLASS_OF, MIRROR_OF, MIRRORS, MEMBERS, MEMBER_COUNTS, LATE_DIGITS, LATE_DIGIT_COUNT,
  COUNTS, KINDS, KIND_COUNT, EARLY, EARLY_STEPS, TAIL_BLOCKS, TAIL_BLOCK_COUNT };
enum { CLASS_0 = 0, CAPACITY = 6, ACCEPTS = 8 };
enum { LATE_CELLS = 3, DIGIT_CELLS = 256 };

typedef struct { int32_t next, site; } vesicle;
typedef struct { uint32_t offset, length; } row;
/* What a site's class of starts and its mirror lead to. */
typedef struct { const uint32_t *waits; const row *rows; const uint16_t *order, *mirror; } start;

/* Tables of one kind of vesicle. */
static struct {
  const uint32_t *waits, *cells, *late_digits, *kinds, *early, *tail_blocks, *guide, *thresholds;
  const uint8_t *bin_of, *mirror_of;
  const uint16_t *order, *class_of, *mirrors, *members, *member_counts;
  const row *rows;
  const double *accepts;
  start *starts;
  int32_t wait_steps, landing_steps, rows_per_class, late_digit_count, kind_count, early_steps, tail_block_count, first_count, last_count, capacity;
} table;

static void read_tables(const char *path, int sites) {
  const char *file = read_whole(path);
  const char *memory = file + 8;
  const uint32_t *attempt = (const void *)(memory + *(const uint32_t *)file);
  const uint32_t *kind = (const void *)(memory + attempt[CLASS_0]);
  const int32_t *counts = (const void *)(memory + kind[COUNTS]);
#define AT(name) ((const void *)(memory + kind[name]))
  table.waits = AT(WAITS);
  table.bin_of = AT(BIN_OF);
  table.rows = AT(ROWS);
  table.cells = AT(CELLS);
  table.order = AT(ORDER);
  table.class_of = AT(CLASS_OF);
  table.mirror_of = AT(MIRROR_OF);
  table.mirrors = AT(MIRRORS);
  table.members = AT(MEMBERS);
  table.member_counts = AT(MEMBER_COUNTS);
  table.late_digits = AT(LATE_DIGITS);
  table.kinds = AT(KINDS);
  table.early = AT(EARLY);
  table.tail_blocks = AT(TAIL_BLOCKS);
#undef AT
  table.accepts = (const void *)(memory + attempt[ACCEPTS]);
  table.wait_steps = kind[WAIT_STEPS];
  table.landing_steps = kind[LANDING_STEPS];
  table.rows_per_class = kind[ROWS_PER_CLASS];
  table.late_digit_count = kind[LATE_DIGIT_COUNT];
  table.kind_count = kind[KIND_COUNT];
  table.early_steps = kind[EARLY_STEPS];
  table.tail_block_count = kind[TAIL_BLOCK_COUNT];
  table.first_count = counts[0];
  table.last_count = counts[1];
  table.guide = (const uint32_t *)counts + 2;
  table.thresholds = table.guide + 256;
  table.capacity = attempt[CAPACITY];
  table.starts = malloc(sizeof(start) * sites);
  for (int site = 0; site < sites; site++) {
    const uint32_t class = table.class_of[site];
    table.starts[site] = (start){ table.waits + (size_t)class * (table.wait_steps + LATE_CELLS), table.rows + class * table.rows_per_class,
      table.order + class * sites, table.mirrors + table.mirror_of[site] * sites };
  }
}

/* The outcome that a draw picks from an alias row. */
static inline uint32_t pick(const uint32_t *cells, uint32_t count, uint32_t draw) {
  const uint64_t product = (uint64_t)draw * count;
  const uint32_t own = product >> 32, cell = cells[own];
  return (uint32_t)product >> 16 < cell >> 16 ? own : (cell & 0xFFFF);
}

static inline void push(int32_t *heads, vesicle *vesicles, int32_t step, int32_t which) {
  vesicles[which].next = heads[step];
  heads[step] = which;
}

/* A first attempt in the exponential tail; drawn again when past the end. */
static __attribute__((noinline)) stream tail_step(const plan *p, stream r, int parity, int32_t *step) {
  do {
    const int32_t block = pick(table.tail_blocks, table.tail_block_count, next(&r));
    *step = table.early_steps + parity + 2 * ((block << 8) + (int32_t)pick(table.late_digits, DIGIT_CELLS, next(&r)));
  } while (*step >= p->steps);
  return r;
}

/* Draws the vesicles that ever attempt, and puts each at its first attempt. */
static stream arrive(const plan *restrict p, stream r, int32_t *restrict heads, vesicle *restrict vesicles) {
  const uint32_t value = next(&r);
  uint32_t k = table.guide[value >> 24];
  while ((int32_t)k < table.last_count && value >= table.thresholds[k]) k++;
  int32_t count = table.first_count + k;
  if (count > table.capacity - p->sites) count = table.capacity - p->sites;
  for (int32_t which = 0; which < count; which++) {
    const uint32_t picked = pick(table.kinds, table.kind_count, next(&r)), start = picked >> 2, type = picked & 3;
    int32_t step;
    if (type == 0) step = pick(table.early + (size_t)start * table.early_steps, table.early_steps, next(&r));
    else if (type == 1) step = table.early_steps + below(&r, p->steps - table.early_steps);
    else r = tail_step(p, r, type - 2, &step);
    vesicles[which].site = table.members[start * 8 + below(&r, table.member_counts[start])];
    push(heads, vesicles, step, which);
  }
  return r;
}

/* A wait beyond the explicit steps. */
static __attribute__((noinline)) stream late_wait(stream r, int32_t *wait) {
  int32_t pairs = 0;
  for (int digit = 0; digit < table.late_digit_count; digit++)
    pairs += pick(table.late_digits + digit * DIGIT_CELLS, DIGIT_CELLS, next(&r)) << 8 * digit;
  *wait += 2 * pairs;
  return r;
}

/* Sends a vesicle from its site, after an attempt at step n, to its next attempt. */
static inline __attribute__((always_inline)) stream jump(const plan *restrict p, stream r, int32_t *restrict heads, vesicle *restrict vesicles, int32_t which, int32_t n) {
  const start from = table.starts[vesicles[which].site];
  int32_t wait = pick(from.waits, table.wait_steps + LATE_CELLS, next(&r)) + 1;
  if (wait > table.wait_steps) {
    if (wait == table.wait_steps + LATE_CELLS) return r;
    r = late_wait(r, &wait);
  }
  if (n + wait >= p->steps) return r;
  const uint32_t bin = table.bin_of[wait < table.landing_steps ? wait : table.landing_steps];
  const row landing = from.rows[2 * bin + (wait & 1)];
  vesicles[which].site = from.mirror[from.order[pick(table.cells + landing.offset, landing.length, next(&r))]];
  push(heads, vesicles, n + wait, which);
  return r;
}

static void attach(const plan *p, sites *s, tally *t, int32_t site, int32_t n) {
  const int k = p->class_of_site[site];
  s->filled[site] = 1;
  while (s->next_sample < p->samples && p->sample_steps[s->next_sample] <= (uint32_t)n) s->next_sample++;
  if (s->next_sample < p->samples) {
    t->filled_sum[k * p->samples + s->next_sample]++;
    t->filled_sum_sq[k * p->samples + s->next_sample] += 2 * s->filled_count[k] + 1;
  }
  s->filled_count[k]++;
  t->events[k * t->replicates + s->replicate]++;
  t->exposure[k * t->replicates + s->replicate] += n + 1;
}

/* The attempts of all steps, until every site is filled. */
static __attribute__((noinline)) void walk_one(const plan *restrict p, sites *restrict s, tally *restrict t, stream r, int32_t *restrict heads, vesicle *restrict vesicles) {
  int open = 0;
  for (int site = 0; site < p->sites; site++) open += table.accepts[site] > 0;
  for (int32_t n = 0; n < p->steps && open; n++) {
    for (int32_t which = heads[n], following; which >= 0; which = following) {
      const int32_t site = vesicles[which].site;
      following = vesicles[which].next;
      if (!s->filled[site] && (double)next(&r) < table.accepts[site]) {
        attach(p, s, t, site, n);
        open--;
      }
      else r = jump(p, r, heads, vesicles, which, n);
    }
  }
}

/* Changes at samples become counts. */
static void sum_up(const plan *p, tally *t) {
  for (int k = 0; k < p->classes; k++)
    for (int i = k * p->samples + 1; i < (k + 1) * p->samples; i++) {
      t->filled_sum[i] += t->filled_sum[i - 1];
      t->filled_sum_sq[i] += t->filled_sum_sq[i - 1];
    }
}

static void walk(const plan *p, tally *t, int from, int to) {
  uint8_t *filled = malloc(p->sites);
  int32_t *heads = malloc(4 * (size_t)p->steps);
  vesicle *vesicles = malloc(sizeof(vesicle) * table.capacity);
  for (int replicate = from; replicate < to; replicate++) {
    stream r = stream_of(p->seed_low, p->seed_high, replicate);
    sites s = { filled, { 0, 0 }, { 0, 0 }, 0, replicate - from };
    memset(filled, 0, p->sites);
    memset(heads, 0xFF, 4 * (size_t)p->steps);
    for (int i = 0; i < p->sites; i++) s.total[p->class_of_site[i]]++;
    r = arrive(p, r, heads, vesicles);
    walk_one(p, &s, t, r, heads, vesicles);
    for (int k = 0; k < p->classes; k++) t->exposure[k * t->replicates + s.replicate] += (int64_t)(s.total[k] - s.filled_count[k]) * p->steps;
  }
  sum_up(p, t);
  free(filled);
  free(heads);
  free(vesicles);
}

int main(int count, char **words) {
  if (count != 3) return 2;
  const plan p = read_plan(words[1]);
  read_tables(words[2], p.sites);
  return serve(&p, walk);
}
