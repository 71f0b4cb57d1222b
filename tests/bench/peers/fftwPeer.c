/* The same jobs in C with FFTW 3 (double, measured plans): what a careful native program does on one core. Speaks the line
   protocol of the other peers: "W1", "W1 file", ... in, one line of JSON per round out. */
#include <fcntl.h>
#include <fftw3.h>
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>
#include <unistd.h>

#define PERIOD 32767

static uint8_t pn[2 * PERIOD + 64];
static double qpsk[4][2], qam64[64][2];

/* ITU-T O.150: b(t) = b(t-14) ^ b(t-15), all ones first, inverted; two periods, so that reading need not wrap */
static void make_tables(void) {
  uint8_t raw[PERIOD];
  for (int t = 0; t < PERIOD; t++) raw[t] = t < 15 ? 1 : raw[t - 14] ^ raw[t - 15];
  for (int t = 0; t < (int)sizeof pn; t++) pn[t] = 1 - raw[t % PERIOD];
  for (int w = 0; w < 4; w++) {
    qpsk[w][0] = (1 - 2 * (w >> 1)) / sqrt(2);
    qpsk[w][1] = (1 - 2 * (w & 1)) / sqrt(2);
  }
  for (int w = 0; w < 64; w++) {
    int b[6];
    for (int i = 0; i < 6; i++) b[i] = 1 - 2 * ((w >> (5 - i)) & 1);
    qam64[w][0] = b[0] * (4 - b[2] * (2 - b[4])) / sqrt(42);
    qam64[w][1] = b[1] * (4 - b[3] * (2 - b[5])) / sqrt(42);
  }
}

static int word_at(int64_t bit, int bits) {
  int value = 0;
  const uint8_t *from = pn + bit % PERIOD;
  for (int i = 0; i < bits; i++) value = 2 * value + from[i];
  return value;
}

typedef struct {
  int size, symbols, large;
  fftw_complex *in, *out, *wave;
  fftw_plan plan;
  size_t samples;
} Job;

static Job make_job(int large) {
  Job job = {large ? 16384 : 2048, large ? 14 : 140, large};
  job.in = fftw_alloc_complex(job.size);
  job.out = fftw_alloc_complex(job.size);
  job.plan = fftw_plan_dft_1d(job.size, job.in, job.out, FFTW_BACKWARD, FFTW_MEASURE);
  job.samples = large ? 14 * (16384 + 1152) : 20 * (2048 * 7 + 160 + 6 * 144);
  job.wave = fftw_alloc_complex(job.samples);
  return job;
}

static void render(Job *job, int64_t repeat, double *peak, double *power) {
  int n = job->size;
  double gain = 1 / sqrt(job->large ? 4096.0 : 2048.0);
  int64_t bit = repeat * 140 * 4800;
  fftw_complex *to = job->wave;
  double largest = *peak, sum = 0;
  for (int l = 0; l < job->symbols; l++) {
    memset(job->in, 0, n * sizeof(fftw_complex));
    int low = job->large ? 1638 : 600, high = low, first = job->large ? 0 : 1;
    for (int i = 0; i < low; i++) {
      const double *p = job->large ? qam64[word_at(bit, 6)] : qpsk[word_at(bit, 2)];
      job->in[n - low + i][0] = p[0] * gain;
      job->in[n - low + i][1] = p[1] * gain;
      bit += job->large ? 6 : 2;
    }
    for (int i = 0; i < high; i++) {
      const double *p = qam64[word_at(bit, 6)];
      job->in[first + i][0] = p[0] * gain;
      job->in[first + i][1] = p[1] * gain;
      bit += 6;
    }
    fftw_execute(job->plan);
    int prefix = job->large ? 1152 : l % 7 == 0 ? 160 : 144;
    memcpy(to, job->out + n - prefix, prefix * sizeof(fftw_complex));
    memcpy(to + prefix, job->out, n * sizeof(fftw_complex));
    for (int i = 0; i < prefix + n; i++) {
      double square = to[i][0] * to[i][0] + to[i][1] * to[i][1];
      sum += square;
      if (square > largest) largest = square;
    }
    to += prefix + n;
  }
  *peak = largest;
  *power += sum;
}

static double now(void) {
  struct timespec t;
  clock_gettime(CLOCK_MONOTONIC, &t);
  return 1e3 * t.tv_sec + 1e-6 * t.tv_nsec;
}

int main(int argc, char **argv) {
  if (argc < 2) return 2;
  make_tables();
  Job small = make_job(0), large = make_job(1);
  int16_t *words = malloc(2 * sizeof(int16_t) * 400000);
  char line[64];
  while (fgets(line, sizeof line, stdin)) {
    Job *job = line[1] == '2' ? &large : &small;
    int repeats = line[1] == '3' ? 72 : 1;
    int file = strstr(line, "file") ? open(argv[1], O_WRONLY | O_CREAT | O_TRUNC, 0644) : -1;
    double start = now(), peak = 0, power = 0;
    for (int r = 0; r < repeats; r++) render(job, r, &peak, &power);
    double scale = 32767 * pow(10, -1 / 20.0) / sqrt(peak), again = 0, ignored = 0;
    int16_t first[8];
    for (int r = 0; r < repeats; r++) {
      if (repeats > 1) render(job, r, &again, &ignored);
      const double *parts = (const double *)job->wave;
      for (size_t i = 0; i < 2 * job->samples; i++) words[i] = (int16_t)lrint(parts[i] * scale);
      if (r == 0) memcpy(first, words, sizeof first);
      if (file >= 0 && write(file, words, 4 * job->samples) < 0) return 1;
    }
    if (file >= 0) {
      fsync(file);
      close(file);
    }
    double ms = now() - start;
    printf("{\"ms\":%.6f,\"peak\":%.17g,\"meanPower\":%.17g,\"firstWords\":[%d,%d,%d,%d,%d,%d,%d,%d]}\n", ms, sqrt(peak),
           power / ((double)repeats * job->samples), first[0], first[1], first[2], first[3], first[4], first[5], first[6], first[7]);
    fflush(stdout);
  }
  return 0;
}
