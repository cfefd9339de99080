/*
 * The loop kernel in C, for comparison: the same law, plant, limits and delay, written so that a compiler vectorises
 * it: LANES loops around one plant side by side, no branch inside, OpenMP over blocks of loops.
 *
 * ORDER is the number of states; LAW the number of constants of the law, in its order.
 */
#include <stdint.h>
#include <string.h>

#define LANES 16
#define LAW 22
#define RING 64

static double larger(double a, double b) { return a > b ? a : b; }
static double smaller(double a, double b) { return a < b ? a : b; }

static void block(int64_t samples, const double *constants, const double *growth, const double *old_effect,
                  const double *new_effect, const double *c, const double *direct, int64_t delay, double reference,
                  double disturbance, int64_t late, double *peak, double *area)
{
    double p[LAW][LANES], x[ORDER][LANES] = {{0}}, rise[ORDER][LANES], ring[RING][LANES] = {{0}};
    double effort[LANES] = {0}, integral[LANES] = {0}, derivative[LANES] = {0}, last_error[LANES] = {0};
    double filtered[LANES] = {0}, led[LANES] = {0}, notch_1[LANES] = {0}, notch_2[LANES] = {0}, old_u[LANES] = {0};
    double highest[LANES] = {0}, sum[LANES] = {0}, old_d = 0.0;
    for (int i = 0; i < LAW; i++)
        for (int l = 0; l < LANES; l++) p[i][l] = constants[l * LAW + i];
    for (int64_t k = 0; k < samples; k++) {
        double *now = ring[k % RING];
        const double *due = ring[(k + RING - delay) % RING];
        double new_d = k >= late ? disturbance : 0.0;
#pragma omp simd
        for (int l = 0; l < LANES; l++) {
            double y = direct[0] * old_u[l] + direct[1] * old_d, seen = direct[2] * old_u[l] + direct[3] * old_d;
            for (int i = 0; i < ORDER; i++) {
                y += c[i] * x[i][l];
                seen += c[ORDER + i] * x[i][l];
            }
            highest[l] = larger(highest[l], y < 0.0 ? -y : y);
            sum[l] += y < reference ? reference - y : y - reference;
            filtered[l] += p[11][l] * (seen - filtered[l]);
            double ahead = p[12][l] * filtered[l] + led[l];
            led[l] += p[14][l] * (p[13][l] * filtered[l] - led[l]);
            double found = p[15][l] * ahead + notch_1[l];
            notch_1[l] = p[16][l] * ahead - p[18][l] * found + notch_2[l];
            notch_2[l] = p[17][l] * ahead - p[19][l] * found;
            double proportional = p[0][l] * (p[5][l] * reference - found);
            double weighted = p[6][l] * reference - found;
            derivative[l] = p[3][l] * derivative[l] + p[2][l] * (weighted - last_error[l]);
            last_error[l] = weighted;
            double wanted = p[7][l] * (proportional + integral[l] + derivative[l]);
            double allowed = smaller(larger(wanted, p[8][l]), p[9][l]);
            allowed = smaller(larger(allowed, effort[l] - p[10][l]), effort[l] + p[10][l]);
            integral[l] += p[1][l] * (reference - found) + p[4][l] * p[7][l] * (allowed - wanted);
            effort[l] = now[l] = allowed;
        }
        for (int i = 0; i < ORDER; i++) {
            double drift = old_effect[2 * i + 1] * old_d + new_effect[2 * i + 1] * new_d;
#pragma omp simd
            for (int l = 0; l < LANES; l++) {
                double total = drift + old_effect[2 * i] * old_u[l] + new_effect[2 * i] * due[l];
                for (int j = 0; j < ORDER; j++) total += growth[i * ORDER + j] * x[j][l];
                rise[i][l] = total;
            }
        }
#pragma omp simd
        for (int l = 0; l < LANES; l++) {
            for (int i = 0; i < ORDER; i++) x[i][l] += rise[i][l];
            old_u[l] = due[l];
        }
        old_d = new_d;
    }
    memcpy(peak, highest, sizeof highest);
    memcpy(area, sum, sizeof sum);
}

/* Every plant meets every tuning; the number of tunings is a multiple of LANES, the delay shorter than RING. */
void run(int64_t plants, int64_t tunings, int64_t samples, const double *constants, const double *growth,
         const double *old_effect, const double *new_effect, const double *c, const double *direct,
         const int64_t *delay, double reference, double disturbance, int64_t threads, double *peak, double *area)
{
    int64_t blocks = tunings / LANES;
#pragma omp parallel for schedule(static) num_threads(threads)
    for (int64_t task = 0; task < plants * blocks; task++) {
        int64_t plant = task / blocks, first = (task % blocks) * LANES;
        block(samples, constants + first * LAW, growth + plant * ORDER * ORDER, old_effect + plant * ORDER * 2,
              new_effect + plant * ORDER * 2, c + plant * 2 * ORDER, direct + plant * 4, delay[2 * plant], reference,
              disturbance, delay[2 * plant + 1], peak + plant * tunings + first, area + plant * tunings + first);
    }
}
