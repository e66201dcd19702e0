/* Seconds that CHOLMOD (Debian: libsuitesparse-dev) needs for one symmetric positive definite matrix in Matrix Market form.
 * Built and run by solver.ts where compiler and library are installed; nothing of it is part of the product.
 * Prints: analyse, factor, solve in wall seconds, then all three in processor seconds. */
#include <stdio.h>
#include <suitesparse/cholmod.h>
#include <time.h>

static double seconds(clockid_t which) {
    struct timespec t;
    clock_gettime(which, &t);
    return t.tv_sec + 1e-9 * t.tv_nsec;
}

int main(int argc, char **argv) {
    FILE *file = argc == 2 ? fopen(argv[1], "r") : NULL;
    if (!file) return 2;
    cholmod_common common;
    cholmod_start(&common);
    cholmod_sparse *matrix = cholmod_read_sparse(file, &common);
    if (!matrix) return 2;
    cholmod_dense *right = cholmod_ones(matrix->nrow, 1, CHOLMOD_REAL, &common);
    double wall[4], processor = seconds(CLOCK_PROCESS_CPUTIME_ID);
    wall[0] = seconds(CLOCK_MONOTONIC);
    cholmod_factor *factor = cholmod_analyze(matrix, &common);
    wall[1] = seconds(CLOCK_MONOTONIC);
    cholmod_factorize(matrix, factor, &common);
    wall[2] = seconds(CLOCK_MONOTONIC);
    cholmod_dense *x = cholmod_solve(CHOLMOD_A, factor, right, &common);
    wall[3] = seconds(CLOCK_MONOTONIC);
    processor = seconds(CLOCK_PROCESS_CPUTIME_ID) - processor;
    printf("[%.5f, %.5f, %.5f, %.5f]\n", wall[1] - wall[0], wall[2] - wall[1], wall[3] - wall[2], processor);
    return x ? 0 : 1;
}
