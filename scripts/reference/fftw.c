/* Times FFTW's real two-dimensional transform, double precision, one thread, for bench-fft.mjs.
 *   cc -O2 fftw.c -o fftw -lfftw3 -lm && ./fftw REPEATS N...
 * Prints one line for each N: N, then forward and inverse times in milliseconds, one for each repeat.
 * Plans are measured (FFTW_MEASURE), as FFTW's manual advises; planning is not timed. */
#include <fftw3.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

static double now_ms(void) {
  struct timespec t;
  clock_gettime(CLOCK_MONOTONIC, &t);
  return t.tv_sec * 1e3 + t.tv_nsec * 1e-6;
}

static void fill(double *values, size_t count) {
  for (size_t i = 0; i < count; i++) values[i] = rand() / (double)RAND_MAX - 0.5;
}

static void run(int n, int repeats) {
  size_t modes = (size_t)n * (n / 2 + 1);
  double *values = fftw_malloc(sizeof(double) * n * n);
  fftw_complex *spectrum = fftw_malloc(sizeof(fftw_complex) * modes);
  fftw_plan forward = fftw_plan_dft_r2c_2d(n, n, values, spectrum, FFTW_MEASURE);
  fftw_plan inverse = fftw_plan_dft_c2r_2d(n, n, spectrum, values, FFTW_MEASURE);
  printf("%d", n);
  fill(values, (size_t)n * n);
  for (int i = 0; i < repeats; i++) {
    double start = now_ms();
    fftw_execute(forward);
    double middle = now_ms();
    fftw_execute(inverse);
    printf(" %.4f %.4f", middle - start, now_ms() - middle);
    for (size_t j = 0; j < (size_t)n * n; j++) values[j] /= (double)n * n;
  }
  printf("\n");
  fftw_destroy_plan(forward);
  fftw_destroy_plan(inverse);
  fftw_free(values);
  fftw_free(spectrum);
}

int main(int argc, char **argv) {
  for (int i = 2; i < argc; i++) run(atoi(argv[i]), atoi(argv[1]));
  return 0;
}
