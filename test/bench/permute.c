/* Storage under permutation in plain C, one thread: for every node and permutation the next values are
   shuffled (Fisher & Yates), pairs of past and next are counted, and the counts make an entropy. Answers
   every line on standard input, the number of permutations, with one line of JSON. */
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

static double now(void) {
  struct timespec t;
  clock_gettime(CLOCK_MONOTONIC, &t);
  return t.tv_sec * 1e3 + t.tv_nsec / 1e6;
}

/* xoroshiro128+ (Blackman & Vigna), as on the other side; numbers below a bound by one multiplication. */
static uint64_t first = 0x9e3779b97f4a7c15u, second = 0x243f6a8885a308d3u;
static uint64_t turned(uint64_t x, int by) { return (x << by) | (x >> (64 - by)); }
static uint32_t below(uint32_t count) {
  uint64_t sum = first + second;
  second ^= first;
  first = turned(first, 24) ^ second ^ (second << 16);
  second = turned(second, 37);
  return (uint32_t)(((sum >> 32) * count) >> 32);
}

int main(int argc, char **argv) {
  if (argc < 6) return 2;
  int nodes = atoi(argv[2]), steps = atoi(argv[3]), alphabet = atoi(argv[4]), history = atoi(argv[5]);
  int windows = steps - history;
  uint32_t pasts = 1;
  for (int j = 0; j < history; j++) pasts *= alphabet;
  uint32_t blocks = pasts * alphabet;
  uint8_t *states = malloc((size_t)nodes * steps);
  FILE *file = fopen(argv[1], "rb");
  if (!file || fread(states, 1, (size_t)nodes * steps, file) != (size_t)nodes * steps) return 1;
  fclose(file);
  uint16_t *past = malloc(windows * sizeof *past);
  uint8_t *next = malloc(windows);
  uint32_t *counts = malloc(blocks * sizeof *counts);
  char line[64];
  while (fgets(line, sizeof line, stdin)) {
    int permutations = atoi(line);
    double start = now(), sum = 0;
    for (int node = 0; node < nodes; node++) {
      uint32_t code = 0;
      for (int step = 0; step < steps; step++) {
        uint8_t state = states[(size_t)step * nodes + node];
        if (step >= history) {
          past[step - history] = code * alphabet;
          next[step - history] = state;
        }
        code = (code * alphabet + state) % pasts;
      }
      for (int permutation = 0; permutation < permutations; permutation++) {
        for (int i = windows - 1; i > 0; i--) {
          uint32_t j = below(i + 1);
          uint8_t held = next[i];
          next[i] = next[j];
          next[j] = held;
        }
        memset(counts, 0, blocks * sizeof *counts);
        for (int i = 0; i < windows; i++) counts[past[i] + next[i]]++;
        double entropy = 0;
        for (uint32_t id = 0; id < blocks; id++) {
          if (counts[id]) entropy -= counts[id] * log2((double)counts[id] / windows);
        }
        sum += entropy / windows;
      }
    }
    printf("{\"milliseconds\":%.6f,\"entropy\":%.12f}\n", now() - start,
           sum / nodes / permutations);
    fflush(stdout);
  }
  return 0;
}
