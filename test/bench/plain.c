/* The two passes in plain C, one thread: count blocks with a rolling code; map to float32.
   Answers every line on standard input with one line of JSON. */
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

#define CELLS 10000
#define STEPS 1000
#define HISTORY 16
#define BLOCKS (1u << (HISTORY + 1))

static double now(void) {
  struct timespec t;
  clock_gettime(CLOCK_MONOTONIC, &t);
  return t.tv_sec * 1e3 + t.tv_nsec / 1e6;
}

int main(int argc, char **argv) {
  if (argc < 2) return 2;
  uint8_t *states = malloc((size_t)CELLS * STEPS);
  FILE *file = fopen(argv[1], "rb");
  if (!file || fread(states, 1, (size_t)CELLS * STEPS, file) != (size_t)CELLS * STEPS) return 1;
  fclose(file);
  uint32_t *counts = malloc(BLOCKS * sizeof *counts);
  uint32_t *code = malloc(CELLS * sizeof *code);
  float *table = malloc(BLOCKS * sizeof *table);
  float *map = malloc((size_t)CELLS * STEPS * sizeof *map);
  char line[64];
  while (fgets(line, sizeof line, stdin)) {
    memset(counts, 0, BLOCKS * sizeof *counts);
    double start = now();
    memset(code, 0, CELLS * sizeof *code);
    for (int step = 0; step < STEPS; step++) {
      const uint8_t *row = states + (size_t)step * CELLS;
      for (int cell = 0; cell < CELLS; cell++) {
        uint32_t c = ((code[cell] << 1) | row[cell]) & (BLOCKS - 1);
        code[cell] = c;
        if (step >= HISTORY) counts[c]++;
      }
    }
    double counted = now();
    double next[2] = {0, 0}, total = 0;
    for (uint32_t id = 0; id < BLOCKS; id++) next[id & 1] += counts[id];
    total = next[0] + next[1];
    for (uint32_t id = 0; id < BLOCKS; id++) {
      double past = (double)counts[id] + counts[id ^ 1];
      table[id] = counts[id] ? log2(counts[id] / past * (total / next[id & 1])) : NAN;
    }
    double tabled = now();
    memset(code, 0, CELLS * sizeof *code);
    for (int step = 0; step < STEPS; step++) {
      const uint8_t *row = states + (size_t)step * CELLS;
      float *out = map + (size_t)step * CELLS;
      for (int cell = 0; cell < CELLS; cell++) {
        uint32_t c = ((code[cell] << 1) | row[cell]) & (BLOCKS - 1);
        code[cell] = c;
        out[cell] = step >= HISTORY ? table[c] : NAN;
      }
    }
    double mapped = now();
    double sum = 0;
    for (size_t i = (size_t)HISTORY * CELLS; i < (size_t)CELLS * STEPS; i++) sum += map[i];
    uint32_t check = 0;
    for (uint32_t id = 0; id < BLOCKS; id++) check += counts[id] * (id + 1);
    printf("{\"count\":%.6f,\"map\":%.6f,\"mean\":%.12f,\"check\":%u}\n", counted - start,
           mapped - tabled, sum / ((double)CELLS * (STEPS - HISTORY)), check);
    fflush(stdout);
  }
  return 0;
}
