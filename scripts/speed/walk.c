/*
 * Reference: every vesicle hops every step, one draw per hop; independent in a sealed terminal, or exclusive in a held box.
 * Same streams, order of draws and stop rule as the product's step-by-step walk, so that equal digests prove equal work.
 * gcc -O3 -march=native -ffp-contract=off -o walk walk.c
 */
#include "stream.h"
#include "tally.h"

enum { FREE, REFLECTING, SITES, EXCHANGE, TAKEN };
enum { GAP_CAP = 512 };

static int32_t offsets[6];

static void sample_at(const plan *p, sites *s, tally *t, uint32_t n) {
  if (s->next_sample >= p->samples || p->sample_steps[s->next_sample] != n) return;
  for (int k = 0; k < p->classes; k++) {
    const int64_t filled = s->filled_count[k];
    t->filled_sum[k * p->samples + s->next_sample] += filled;
    t->filled_sum_sq[k * p->samples + s->next_sample] += filled * filled;
  }
  s->next_sample++;
}

static void sample_rest(const plan *p, sites *s, tally *t) {
  while (s->next_sample < p->samples) sample_at(p, s, t, p->sample_steps[s->next_sample]);
}

/* A hop onto a voxel that carries sites: true when the vesicle attaches. */
static __attribute__((noinline)) int hits(const plan *p, sites *s, tally *t, stream *r, int32_t voxel, uint32_t direction) {
  const int32_t site = p->site_behind[6 * voxel + direction];
  if (site < 0 || s->filled[site]) return 0;
  const int k = p->class_of_site[site];
  if (!chance(r, p->attach[k])) return 0;
  s->filled[site] = 1;
  s->filled_count[k]++;
  t->events[k * t->replicates + s->replicate]++;
  return 1;
}

/* The rare path of a hop; the state is handed over by value, so that the loops keep theirs in registers. */
static __attribute__((noinline)) stream meet(const plan *p, sites *s, tally *t, stream r, int32_t voxel, uint32_t direction, uint8_t flag, int *gone) {
  if (flag == SITES) *gone = hits(p, s, t, &r, voxel, direction);
  else *gone = !p->exclusive || chance(&r, 1 - p->occupancy);
  return r;
}

/* One step of all vesicles; the last takes the place of one that is gone and still moves. Returns how many are left. */
static __attribute__((noinline)) int move_independent(const plan *restrict p, sites *restrict s, tally *restrict t, stream *restrict state, int32_t *restrict list, int count) {
  const uint8_t *restrict flags = p->flags;
  stream r = *state;
  for (int i = 0; i < count;) {
    const int32_t voxel = list[i];
    const uint32_t direction = below(&r, 6);
    const int32_t target = voxel + offsets[direction];
    const uint8_t flag = flags[target];
    if (flag == FREE) list[i++] = target;
    else if (flag == REFLECTING) i++;
    else {
      int gone;
      r = meet(p, s, t, r, voxel, direction, flag, &gone);
      if (gone) list[i] = list[--count];
      else i++;
    }
  }
  *state = r;
  return count;
}

static __attribute__((noinline)) int move_exclusive(const plan *restrict p, sites *restrict s, tally *restrict t, stream *restrict state, uint8_t *restrict cells, int32_t *restrict list, int count) {
  stream r = *state;
  for (int i = 0; i < count;) {
    const int32_t voxel = list[i];
    const uint32_t direction = below(&r, 6);
    const int32_t target = voxel + offsets[direction];
    const uint8_t flag = cells[target];
    if (flag == FREE) {
      cells[voxel] = FREE;
      cells[target] = TAKEN;
      list[i++] = target;
    }
    else if (flag == REFLECTING || flag == TAKEN) i++;
    else {
      int gone;
      r = meet(p, s, t, r, voxel, direction, flag, &gone);
      if (!gone) i++;
      else {
        cells[voxel] = FREE;
        list[i] = list[--count];
      }
    }
  }
  *state = r;
  return count;
}

static uint32_t draw_gap(const plan *p, stream *r) {
  const uint32_t draw = next(r);
  uint32_t k = p->gap_guide[draw >> 24];
  while (k < (uint32_t)p->gap_last && draw >= p->gap_thresholds[k]) k++;
  return k;
}

static int let_in(const plan *p, stream *r, uint8_t *cells, int32_t *list, int count) {
  for (int face = 0; face < p->boundary_count;) {
    const uint32_t gap = draw_gap(p, r);
    face += gap;
    if (gap == GAP_CAP) continue;
    if (face >= p->boundary_count) break;
    const int32_t voxel = p->boundary[face++];
    if (cells[voxel] != FREE) continue;
    cells[voxel] = TAKEN;
    list[count++] = voxel;
  }
  return count;
}

static int place(const plan *p, stream *r, uint8_t *cells, int32_t *list) {
  int count = 0;
  if (!p->exclusive) {
    for (; count < p->vesicles; count++) list[count] = p->free_voxels[below(r, p->free_count)];
    return count;
  }
  memcpy(cells, p->flags, p->cells);
  for (int i = 0; i < p->free_count; i++) {
    if (!chance(r, p->occupancy)) continue;
    cells[p->free_voxels[i]] = TAKEN;
    list[count++] = p->free_voxels[i];
  }
  return count;
}

static void walk(const plan *p, tally *t, int from, int to) {
  uint8_t *filled = malloc(p->sites), *cells = malloc(p->cells);
  int32_t *list = malloc(4 * (size_t)(p->cells + p->vesicles));
  for (int replicate = from; replicate < to; replicate++) {
    stream r = stream_of(p->seed_low, p->seed_high, replicate);
    sites s = { filled, { 0, 0 }, { 0, 0 }, 0, replicate - from };
    memset(filled, 0, p->sites);
    for (int i = 0; i < p->sites; i++) s.total[p->class_of_site[i]]++;
    int count = place(p, &r, cells, list);
    for (int n = 0;; n++) {
      sample_at(p, &s, t, n);
      if (n == p->steps) break;
      if (s.filled_count[0] + s.filled_count[1] == p->sites) {
        sample_rest(p, &s, t);
        break;
      }
      for (int k = 0; k < p->classes; k++) t->exposure[k * t->replicates + s.replicate] += s.total[k] - s.filled_count[k];
      if (!p->exclusive) {
        count = move_independent(p, &s, t, &r, list, count);
        continue;
      }
      count = move_exclusive(p, &s, t, &r, cells, list, count);
      if (p->held) count = let_in(p, &r, cells, list, count);
    }
  }
  free(filled);
  free(cells);
  free(list);
}

int main(int count, char **words) {
  if (count != 2) return 2;
  const plan p = read_plan(words[1]);
  const int32_t steps[6] = { 1, -1, p.row, -p.row, p.layer, -p.layer };
  memcpy(offsets, steps, sizeof offsets);
  return serve(&p, walk);
}
