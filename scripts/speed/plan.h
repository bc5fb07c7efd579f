/* A compiled plan as scripts/speed/references.ts writes it: a head of whole numbers, four real numbers, then arrays, each padded to 4 bytes. */
#ifndef MOORAGE_PLAN_H
#define MOORAGE_PLAN_H
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>

typedef struct {
  int32_t exclusive, held, cells, free_count, boundary_count, sites, classes, steps, samples, vesicles, row, layer, gap_last;
  uint32_t seed_low, seed_high, spare;
  double occupancy, attach[2], smax;
  const uint8_t *flags, *class_of_site;
  const int32_t *site_behind, *voxel_of_site, *free_voxels, *boundary;
  const uint32_t *sample_steps, *gap_guide, *gap_thresholds;
} plan;

#define PLAN_HEAD 16
#define PLAN_REALS 4

static void *read_whole(const char *path) {
  FILE *file = fopen(path, "rb");
  if (!file) { perror(path); exit(2); }
  fseek(file, 0, SEEK_END);
  const long size = ftell(file);
  rewind(file);
  void *bytes = malloc(size);
  if (!bytes || fread(bytes, 1, size, file) != (size_t)size) { perror(path); exit(2); }
  fclose(file);
  return bytes;
}

static inline const void *take(const char **at, size_t bytes) {
  const void *here = *at;
  *at += (bytes + 3) / 4 * 4;
  return here;
}

static plan read_plan(const char *path) {
  const char *at = read_whole(path);
  plan p;
  const int32_t *head = take(&at, 4 * PLAN_HEAD);
  int32_t *whole = &p.exclusive;
  for (int i = 0; i < PLAN_HEAD; i++) whole[i] = head[i];
  const double *reals = take(&at, 8 * PLAN_REALS);
  p.occupancy = reals[0];
  p.attach[0] = reals[1];
  p.attach[1] = reals[2];
  p.smax = reals[3];
  p.flags = take(&at, p.cells);
  p.site_behind = take(&at, 24 * (size_t)p.cells);
  p.voxel_of_site = take(&at, 4 * (size_t)p.sites);
  p.class_of_site = take(&at, p.sites);
  p.sample_steps = take(&at, 4 * (size_t)p.samples);
  p.free_voxels = take(&at, 4 * (size_t)p.free_count);
  p.boundary = take(&at, 4 * (size_t)p.boundary_count);
  p.gap_guide = take(&at, 1024);
  p.gap_thresholds = take(&at, 4 * ((size_t)p.gap_last + 1));
  return p;
}
#endif
