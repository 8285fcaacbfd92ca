/* Supply, meters, windings, performance, safety: published examples, the source beside each row. */
#include "assess/performance.h"
#include "assess/reforming.h"
#include "assess/sheet_voltage.h"
#include "assess/supply.h"
#include "assess/winding.h"

#include "bench.h"

/* Malvino and Bates, Electronic Principles, 7th ed., examples 4-6 to 4-8: peak-to-peak ripple of
   a reservoir; 120 V, 5:1, 5 kohm, 100 uF, 60 Hz. Printed to two figures (seen). */
static void ripple_of_a_reservoir(void **state)
{
    (void)state;
    double peak_v = 120 * sqrt(2) / 5;
    assert_close(supply_sawtooth(peak_v / 5e3, 60, 100e-6), 1.1, 0.05);        /* half wave */
    assert_close(supply_sawtooth(peak_v / 2 / 5e3, 120, 100e-6), 0.28, 0.005); /* centre tap */
    assert_close(supply_sawtooth(peak_v / 5e3, 120, 100e-6), 0.57, 0.005);     /* bridge */
    /* "Electrical Power Systems Technology": 800 mA, 300 uF, 60 Hz, 6.4 V rms of the sawtooth */
    assert_close(supply_sawtooth(0.8, 120, 300e-6) / (2 * sqrt(3)), 6.4, 0.05);
    /* First harmonic of a sawtooth: Vpp/(pi*sqrt(2)) rms (Fourier). */
    assert_relative(supply_ripple(0.1, 100, 16e-6, 0),
                    supply_sawtooth(0.1, 100, 16e-6) / (3.141592653589793 * sqrt(2)), 1e-9);
    /* the resistance in the capacitor adds at right angles */
    assert_relative(supply_ripple(0.1, 100, 1e9, 3), sqrt(2) * 0.1 * 3, 1e-6);
}

/* Encyclopaedia text "Ripple (electrical)": LC section 1/(w^2 LC - 1), RC sqrt(1 + (wRC)^2); the
   ripple factor of 10 H and 40 uF at 60 Hz is 0.829/(L*C[uF]) = 0.002073 (seen), of which the choke
   input's own share at 2f, 0.471*R/X_L for a load R, leaves X_C/(X_L*R)... held as the ratio. */
static void sections(void **state)
{
    (void)state;
    double omega = 2 * 3.141592653589793 * 120;
    struct supply_section lc = {.series_h = 10, .capacitance_f = 40e-6, .load_ohm = INFINITY};
    assert_relative(supply_section_share(&lc, 120), 1 / (omega * omega * 10 * 40e-6 - 1), 1e-9);
    /* sqrt(2)/3 of the first harmonic's relative height before the choke, 2/3 of the mean peak,
       gives the table's 0.002073 for the approximation X_C/X_L */
    assert_close(sqrt(2) / 3 * supply_section_share(&lc, 120), 0.002073, 0.00002);
    struct supply_section rc = {.series_ohm = 1e3, .capacitance_f = 16e-6, .load_ohm = INFINITY};
    double wrc = 2 * 3.141592653589793 * 100 * 1e3 * 16e-6;
    assert_relative(supply_section_share(&rc, 100), 1 / sqrt(1 + wrc * wrc), 1e-9);
}

/* Helfrick and Cooper, Modern Electronic Instrumentation, example 4-5, p. 62, and others. */
static void loading_of_a_meter(void **state)
{
    (void)state;
    static const struct {
        double true_v, source_ohm, ohm_per_v, range_v, reads_v, tolerance;
    } rows[] = {
        {50, 33333.3333, 1000, 50, 30, 0.005},      /* 150 V, 100 k over 50 k (seen) */
        {50, 33333.3333, 20000, 50, 48.387, 0.001}, /* printed 48.37 */
        {15, 200e3, 20000, 20, 10, 1e-9},           /* 30 V across two 400 k (seen) */
        {138.8889, 11111.111, 500, 150, 120.968, 0.001},
        {138.8889, 11111.111, 1000, 150, 129.310, 0.001},
        {138.8889, 11111.111, 10000, 150, 137.868, 0.001},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        double meter_ohm = rows[i].ohm_per_v * rows[i].range_v;
        double reads_v = meter_reading(rows[i].true_v, rows[i].source_ohm, meter_ohm);
        assert_close(reads_v, rows[i].reads_v, rows[i].tolerance);
        assert_relative(meter_true_volts(reads_v, rows[i].source_ohm, meter_ohm), rows[i].true_v,
                        1e-12);
    }
    assert_close(meter_reading(50, 33e3, INFINITY), 50, 0);
}

/* V = V0*exp(-t/RC): 450 V to 60 V in 5 s with 40 uF wants 62.04 k, 373 V to 34 V in 1 s with
   0.1 uF 4.175 M (arithmetic on the figures of IEC 60204-1 and IEC 60335-1). */
static void bleeding(void **state)
{
    (void)state;
    assert_close(reforming_bleed_time(62.04e3, 40e-6, 450, 60), 5, 0.001);
    assert_close(reforming_bleed_time(4.175e6, 0.1e-6, 373, 34), 1, 0.001);
    assert_close(reforming_bleed_time(10e3, 40e-6, 9, 10), 0, 0);
}

/* Copper: 0.393 % per kelvin at 20 C (IEC 60028, recalled). A winding of 100 ohm is 119.65 at 70 C,
   98.0 at 15 C. */
static void copper(void **state)
{
    (void)state;
    assert_close(winding_at(100, 70), 119.65, 0.001);
    assert_close(winding_at(100, 15), 98.035, 0.001);
}

static struct quantity amount(double value, enum unit unit)
{
    return (struct quantity){.set = true, .value = value, .unit = unit, .written = ""};
}

/* Twice the volts are 6.02 dB, twice the watts 3.01 dB. */
static void decibels(void **state)
{
    (void)state;
    struct performance_row row = {.found = amount(1, UNIT_VOLTAGE),
                                  .left = amount(2, UNIT_VOLTAGE)};
    assert_close(performance_assess(&row).db, 6.0206, 1e-4);
    row.found = amount(2, UNIT_POWER);
    row.left = amount(1, UNIT_POWER);
    assert_close(performance_assess(&row).db, -3.0103, 1e-4);
    row.found = amount(-40, UNIT_DECIBEL);
    row.left = amount(-46, UNIT_DECIBEL);
    assert_close(performance_assess(&row).db, -6, 1e-12);
    row.found = amount(400, UNIT_FREQUENCY);
    row.left = amount(500, UNIT_FREQUENCY);
    assert_true(isnan(performance_assess(&row).db));
    assert_close(performance_assess(&row).percent, 25, 1e-9);
    row.left = amount(1, UNIT_VOLTAGE); /* of another unit */
    assert_true(isnan(performance_assess(&row).percent));
}

/* ---- the same in a job */

#define METERS "instruments:\n  volts:\n    accuracy: 0.1 % + 0.01 V\n    input: 10 meg\n"

static void a_job_with_a_supply(void **state)
{
    (void)state;
    struct bench bench;
    bench_assess(&bench, HEAD
                 "capacitors:\n"
                 "  C1:\n    type: electrolytic\n    marked: 16 uF 450 V\n    place: "
                 "reservoir\n    current: 100 mA\n    service: 300 V\n    measured: 8 uF\n"
                 "    done: replaced\n    fitted: 16 uF 450 V\n    hum: found 20 V, left 10 V\n"
                 "  C2:\n    type: electrolytic\n    marked: 16 uF 450 V\n    place: smoothing\n"
                 "    current: 100 mA\n    service: 280 V\n    feed: L1\n"
                 "windings:\n  L1: {marked: 200 ohm, inductance: 10 H}\n");
    const struct supply_node *nodes = bench.findings->bench.nodes;
    assert_int_equal(bench.findings->bench.node_count, 2);
    assert_true(nodes[0].judged && nodes[1].judged);
    assert_close(nodes[0].frequency_hz, 100, 0);
    /* sqrt(2)*0.1/(2 pi 100 8e-6) = 28.13 V, and half of it with twice the capacitance */
    assert_close(nodes[0].found.predicted_v, 28.135, 0.01);
    assert_close(nodes[0].predicted_db, -6.0206, 1e-3);
    assert_close(nodes[0].measured_db, -6.0206, 1e-3);
    assert_true(nodes[1].found.share < 0.02);
    assert_relative(nodes[1].found.predicted_v, nodes[1].found.share * nodes[0].found.predicted_v,
                    1e-12);
    bench_release(&bench);
}

/* 100 mA by full wave is 170 mA rms in the reservoir: 28.9 mW in 1 ohm beside 0.1 mA * 300 V, and
   0.289 W in 10 ohm, more than a tubular of 0.05 W may be heated by, whatever it leaks. */
static void ripple_heats_the_reservoir(void **state)
{
    (void)state;
    struct bench bench;
#define RESERVOIR(ref, measured)                                                                   \
    "  " ref ":\n    type: electrolytic\n    marked: 16 uF 450 V\n    place: reservoir\n"          \
    "    current: 100 mA\n    service: 300 V\n    measured: " measured                             \
    "\n    readings:\n      - 300 V 60 s 0.1000 mA, 5 min 0.1000 mA\n"
    bench_assess(&bench, HEAD METERS "capacitors:\n" RESERVOIR("C1", "16 uF 1 ohm")
                             RESERVOIR("C2", "16 uF 10 ohm") RESERVOIR("C3", "16 uF"));
#undef RESERVOIR
    const struct criterion *heat = bench_criterion(bench_part(&bench, "C1"), CRITERION_HEAT, false);
    assert_close(heat->value, 0.0300 + 0.0289, 1e-6);
    assert_int_equal(heat->outcome, OUTCOME_FAIL); /* 0.0589 W of 0.05 W */
    heat = bench_criterion(bench_part(&bench, "C2"), CRITERION_HEAT, false);
    assert_close(heat->value, 0.0300 + 0.289, 1e-6);
    assert_int_equal(heat->outcome, OUTCOME_FAIL);
    assert_close(heat->limit, 0.05, 0);
    heat = bench_criterion(bench_part(&bench, "C3"), CRITERION_HEAT, false);
    assert_close(heat->value, 0.0300, 1e-6);
    assert_int_equal(heat->outcome, OUTCOME_PASS);
    bench_release(&bench);
}

static void hum_without_frequency(void **state)
{
    (void)state;
    struct bench bench;
    bench_assess(&bench, "job: T-1\nset:\n  maker: Pellworth\n  model: Test\nreceived: 2031-02-03\n"
                         "capacitors:\n  C1:\n    type: electrolytic\n    marked: 16 uF 450 V\n"
                         "    place: reservoir\n    current: 100 mA\n    service: 300 V\n"
                         "    hum: found 20 V\n");
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_RIPPLE_WITHOUT_FREQUENCY), 1);
    assert_false(bench.findings->bench.nodes[0].judged);
    assert_string_equal(bench.findings->bench.nodes[0].missing, "frequency");
    bench_release(&bench);
}

static void sheet_volts(void **state)
{
    (void)state;
    struct bench bench;
    bench_assess(&bench, HEAD METERS
                 "voltages:\n  meter: 1000 ohm/V\n  sheet_mains: 230 V\n  found_mains: 230 V\n"
                 "  left_mains: 253 V\n  points:\n"
                 "    anode: sheet 30 V, range 50 V, source 33.3333k, found 49.8 V, left 54.8 V\n"
                 "    grid: sheet 30 V, found 30 V\n");
    const struct voltage_findings *voltages = bench.findings->bench.voltages;
    assert_close(voltages[0].true_v, 50, 0.001);
    assert_close(voltages[0].expected_v[0], 50 * 10e6 / (10e6 + 33333.3), 0.001);
    assert_close(voltages[0].expected_v[1], 1.1 * voltages[0].expected_v[0], 0.001);
    assert_int_equal(voltages[0].compared[0].outcome, OUTCOME_PASS);
    assert_int_equal(voltages[0].compared[1].outcome, OUTCOME_PASS);
    assert_int_equal(voltages[1].compared[0].outcome, OUTCOME_NOT_JUDGED);
    assert_string_equal(voltages[1].compared[0].missing, "range");
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_SHEET_WITHOUT_METER), 1);
    bench_release(&bench);
}

static void safety_figures(void **state)
{
    (void)state;
    struct bench bench;
    bench_assess(&bench,
                 HEAD "safety:\n  touch current: 0.300 mA, second 0.600 mA\n"
                      "  earth bond: 0.08 ohm\n  insulation: 0.5 M at 500 V\n"
                      "  volts at the plug, after pulling it: 10 V 1 s\n"
                      "  fuse: 3 A\n  hum of the transformer: 3 mV\n  residual: 80 V 1 s\n");
    const struct safety_findings *rows = bench.findings->bench.safety;
    assert_int_equal(rows[0].value.outcome, OUTCOME_FAIL); /* the worse polarity first */
    assert_close(rows[0].value.high, 0.5e-3, 0);           /* EN 50678, EN 50699 (second-hand) */
    assert_int_equal(rows[0].second.outcome, OUTCOME_PASS);
    assert_int_equal(rows[1].value.outcome, OUTCOME_PASS);
    assert_int_equal(rows[2].value.outcome, OUTCOME_FAIL);
    assert_int_equal(rows[3].value.outcome, OUTCOME_PASS);
    assert_int_equal(rows[4].value.why, WHY_NO_FIGURE);
    assert_int_equal(rows[5].kind, SAFETY_KIND_COUNT);
    /* 80 V after 1 s says nothing of 60 V after 5 s */
    assert_int_equal(rows[6].value.outcome, OUTCOME_NOT_JUDGED);
    bench_release(&bench);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(ripple_of_a_reservoir),
        cmocka_unit_test(sections),
        cmocka_unit_test(loading_of_a_meter),
        cmocka_unit_test(bleeding),
        cmocka_unit_test(copper),
        cmocka_unit_test(decibels),
        cmocka_unit_test(a_job_with_a_supply),
        cmocka_unit_test(ripple_heats_the_reservoir),
        cmocka_unit_test(hum_without_frequency),
        cmocka_unit_test(sheet_volts),
        cmocka_unit_test(safety_figures),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
