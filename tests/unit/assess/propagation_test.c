/*
 * The uncertainty of a coupling part's criteria against a Monte Carlo of the same inputs
 * (JCGM 101:2008, clause 7: draw the inputs, take the spread of the results).
 */
#include "assess/leak.h"
#include "assess/place.h"
#include "bench.h"

static const char job_text[] =
    "job: T-1\nset:\n  maker: P\n  supply: transformer\n  mains: 230 V\nreceived: 2031-02-03\n"
    "conditions:\n  bench: 20 C\n  working: 40 C\n"
    "instruments:\n  leakage:\n    accuracy: 2 % + 0.02 uA\n    resolution: 0.01 uA\n"
    "  ohms:\n    accuracy: 1 % + 1 ohm\n"
    "resistors:\n  R1: {marked: 270 ohm 1 W, measured: 266 ohm, done: kept}\n"
    "  R2: {marked: 470k, measured: 512k, done: kept}\n"
    "stages:\n  output:\n    valve: V4 6V6GT\n    row: va 250 V, vg2 250 V, vg1 -12.5 V, "
    "ia 45 mA, ig2 4.5 mA, gm 4.1 mA/V, ra 50k\n    supply: 262.5 V\n    anode: 310 ohm\n"
    "    cathode: R1\n    grid_leak: R2\n"
    "capacitors:\n  C1:\n    type: paper\n    marked: 0.02 uF 400 V\n    place: coupling\n"
    "    stage: output\n    source: 90 V\n    readings:\n      - 100 V 60 s 0.50 uA\n";

enum { DRAWS = 20000 };

/* xorshift, so that every run draws the same */
static double uniform(unsigned long long *state)
{
    *state ^= *state << 13;
    *state ^= *state >> 7;
    *state ^= *state << 17;
    return (double)(*state >> 11) / (double)(1ULL << 53) * 2 - 1; /* -1 to 1 */
}

static void test_against_monte_carlo(void **state)
{
    (void)state;
    struct bench bench;
    struct findings *findings = bench_assess(&bench, job_text);
    const struct capacitor_findings *part = &findings->capacitors[0];
    const struct criterion *rise = bench_criterion(part, CRITERION_CATHODE_CURRENT, false);
    assert_non_null(rise);
    struct arena arena = {0};
    struct diagnostics silent = diagnostics_in(&arena);
    struct stage_set set = stages_prepare(bench.job, &bench.shop.policy, &arena, &silent);
    struct place_bench place_bench = {bench.job, &bench.shop.policy, &set};
    struct place_case place = place_prepare(&place_bench, part->part);
    struct stage_circuit circuit = place.circuits[0];
    struct stage_solution bare;
    unsigned long long seed = 20310203;
    double sum = 0, squares = 0;
    for (int i = 0; i < DRAWS; i++) {
        struct reading reading = *part->readings[0].reading;
        reading.value.value +=
            (0.02 * 0.5e-6 + 0.02e-6) * uniform(&seed) + 0.005e-6 * uniform(&seed);
        reading.set_volts.value *= 1 + 0.01 * uniform(&seed);
        struct leak_case given = {
            .bench = {&bench.job->instruments[0], &bench.shop.policy, 20 + uniform(&seed)},
            .type = DIELECTRIC_PAPER,
            .exponent = NAN,
            .service_v = part->service_v,
            .working_c = 40};
        struct reading_findings found;
        reading_evaluate(&reading, &given.bench, &found);
        given.reading = &found;
        double leak_s = leak_of(&given).conductance_s;
        circuit.cathode_ohm = 266 + (0.01 * 266 + 1) * uniform(&seed);
        circuit.grid_leak_ohm = 512e3 + (0.01 * 512e3 + 1) * uniform(&seed);
        stages_solve(&circuit, 1, &bare);
        place.circuits = &circuit;
        place.bare = &bare;
        struct place_values values;
        place_evaluate(&place, leak_s, &values);
        assert_int_equal(values.items[0].key, CRITERION_CATHODE_CURRENT);
        sum += values.items[0].value;
        squares += values.items[0].value * values.items[0].value;
    }
    double mean = sum / DRAWS, spread = sqrt(squares / DRAWS - mean * mean);
    print_message("rise %.4f %%: propagated u %.4f, drawn %.4f\n", rise->value,
                  rise->uncertainty / 2, spread);
    assert_true(rise->uncertainty / 2 >= 0.97 * spread);
    assert_true(rise->uncertainty / 2 <= 1.03 * spread);
    arena_release(&arena);
    bench_release(&bench);
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(test_against_monte_carlo)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
