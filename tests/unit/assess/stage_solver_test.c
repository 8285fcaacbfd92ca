/*
 * The stage solver against circuits worked out elsewhere: ngspice on the same law, and
 * resistance-coupled tables of Philips and Telefunken valve manuals.
 */
#include "stages.h"

#include <stdlib.h>

/* Cathode-biased stages with an e.m.f. at the grid. Figures: ngspice (reltol 1e-7) on the same law;
   0.3 %, for the cathode resistors are rounded. Supplies: row volts + bias. */
static void cathode_bias_with_grid_emf(void **state)
{
    (void)state;
    static const struct {
        const char *type, *row;
        double supply_v, screen_supply_v, cathode_ohm, grid_v;
        double anode_ma, screen_ma, cathode_v;
    } rows[] = {
        {"6V6GT", "A1-250", 262.5, 262.5, 253, 6.25, 56.5, 5.65, 15.69},
        {"6V6GT", "A1-250", 262.5, 262.5, 253, 12.5, 68.3, 6.83, 18.97},
        {"EL84", "A-250", 257.3, 257.3, 136, 3.65, 62.9, 7.21, 9.57},
        {"6F6", "A1-250", 266.5, 266.5, 407, 16.5, 51.8, 9.90, 25.13},
        {"2A3", "A1-250", 295, 0, 750, 22.5, 80.3, 0, 60.21},
        {"12AX7", "A1-250", 252, 0, 1667, 1, 1.64, 0, 2.73},
        {"6J7", "A1-250", 253, 103, 1200, 3, 3.29, 0.82, 4.93},
    };
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct stage_circuit c =
            stage_of(rows[i].type, rows[i].row, rows[i].supply_v, rows[i].screen_supply_v);
        c.cathode_ohm = rows[i].cathode_ohm;
        c.return_v = rows[i].grid_v;
        struct stage_solution s;
        assert_int_equal(stages_solve(&c, 1, &s), SOLVE_OK);
        assert_relative(s.anode_a, rows[i].anode_ma * 1e-3, 0.003);
        assert_close(s.screen_a, rows[i].screen_ma * 1e-3, 0.003 * rows[i].screen_ma * 1e-3 + 5e-6);
        assert_relative(s.cathode_v, rows[i].cathode_v, 0.003);
    }
}

/* A row at its own voltages gives its own currents: without an e.m.f. the bias stays at the row's
   within the rounding of the resistor. */
static void without_emf_the_row_is_met(void **state)
{
    (void)state;
    struct stage_circuit c = stage_of("EL84", "A-250", 257.3, 257.3);
    c.cathode_ohm = 7.3 / 53.5e-3;
    struct stage_solution s;
    assert_int_equal(stages_solve(&c, 1, &s), SOLVE_OK);
    assert_relative(s.anode_a, 48e-3, 1e-5);
    assert_relative(s.screen_a, 5.5e-3, 1e-5);
    assert_relative(s.cathode_v, 7.3, 1e-5);
    assert_relative(s.anode_w, 12.0, 1e-4);
}

/* With load, dropper and a leaking coupling capacitor, to five figures: ngspice on the same law. */
static void output_stage_to_five_figures(void **state)
{
    (void)state;
    struct stage_circuit c = stage_of("6V6GT", "A1-250", 300, 300);
    c.anode_ohm = 300;
    c.screen_ohm = 10e3;
    c.cathode_ohm = 253;
    c.grid_leak_ohm = 470e3;
    c.coupling_source_v = 90;
    c.coupling_leak_s = 1 / 20.1e6;
    struct stage_solution s;
    assert_int_equal(stages_solve(&c, 1, &s), SOLVE_OK);
    assert_close(s.grid_v, 2.0564, 5e-5);
    assert_close(s.cathode_v, 13.239, 5e-4);
    assert_close(s.anode_v - s.cathode_v, 272.35, 5e-3);
    assert_close(s.screen_v - s.cathode_v, 243.77, 5e-3);
    assert_close(s.anode_a, 48.029e-3, 5e-7);
    assert_close(s.screen_a, 4.2989e-3, 5e-8);
    c.coupling_leak_s = 0;
    assert_int_equal(stages_solve(&c, 1, &s), SOLVE_OK);
    assert_close(s.anode_a, 44.793e-3, 5e-7);
    assert_close(s.screen_a, 4.0390e-3, 5e-8);
    assert_close(s.cathode_v, 12.354, 5e-4);
}

static void amplifier_to_five_figures(void **state)
{
    (void)state;
    struct stage_circuit c = stage_of("EF86", "250/140", 250, 250);
    c.anode_ohm = 220e3;
    c.screen_ohm = 1e6;
    c.cathode_ohm = 2.2e3;
    c.grid_leak_ohm = 1e6;
    c.coupling_source_v = 100;
    c.coupling_leak_s = 1 / 100.1e6;
    struct stage_solution s;
    stages_solve(&c, 1, &s);
    assert_close(s.grid_v, 0.9455, 5e-5);
    assert_close(s.cathode_v, 2.2864, 5e-5);
    assert_close(s.anode_v - s.cathode_v, 57.27, 0.01);
    assert_close(s.screen_v - s.cathode_v, 74.13, 5e-3);
    assert_close(s.anode_a, 0.86563e-3, 5e-9);
}

/* Philips, ECC83 as resistance-coupled amplifier, R_a 100 k: Vb V, Rk ohm, Ia mA. The law lies 1 to
   3.3 % above. */
static void philips_ecc83_table(void **state)
{
    (void)state;
    static const double rows[][3] = {{200, 1800, 0.65},
                                     {250, 1500, 0.86},
                                     {300, 1200, 1.11},
                                     {350, 1000, 1.40},
                                     {400, 820, 1.72}};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct stage_circuit c = stage_of("ECC83", "A1-250", rows[i][0], 0);
        c.anode_ohm = 100e3;
        c.cathode_ohm = rows[i][1];
        struct stage_solution s;
        assert_int_equal(stages_solve(&c, 1, &s), SOLVE_OK);
        double error = s.anode_a / (rows[i][2] * 1e-3) - 1;
        assert_in_range((int)(error * 1e4), 50, 350);
    }
}

/* Philips, EF86, R_a 100 k, R_g2 390 k, R_k 1 k: Vb V, Ik mA (printed to 0.05). The law lies 2 to
   7 % above. */
static void philips_ef86_table(void **state)
{
    (void)state;
    static const double rows[][2] = {{400, 3.2}, {350, 2.75}, {300, 2.4}, {250, 2.0}, {200, 1.55}};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct stage_circuit c = stage_of("EF86", "250/140", rows[i][0], rows[i][0]);
        c.anode_ohm = 100e3;
        c.screen_ohm = 390e3;
        c.cathode_ohm = 1e3;
        struct stage_solution s;
        stages_solve(&c, 1, &s);
        double error = s.cathode_a / (rows[i][1] * 1e-3) - 1;
        assert_in_range((int)(error * 1e4), 150, 700);
    }
}

/* Telefunken, EF804S, 250 V: Ra, Rg2, Rk ohm, Ia, Ig2 mA. Within 12 %. */
static void telefunken_ef804s_table(void **state)
{
    (void)state;
    static const double rows[][5] = {{0.3e6, 1.5e6, 2e3, 0.61, 0.11},
                                     {0.2e6, 1e6, 1.5e3, 0.87, 0.16}};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct stage_circuit c = stage_of("EF804S", "250/140 Rk500", 250, 250);
        c.anode_ohm = rows[i][0];
        c.screen_ohm = rows[i][1];
        c.cathode_ohm = rows[i][2];
        c.grid_leak_ohm = 1e6;
        struct stage_solution s;
        stages_solve(&c, 1, &s);
        assert_relative(s.anode_a, rows[i][3] * 1e-3, 0.12);
        assert_relative(s.screen_a, rows[i][4] * 1e-3, 0.12);
    }
}

/* Two 6V6GT on one cathode resistor, an e.m.f. at one grid: +42.7 % there, -16.3 % in the other
   (ngspice on the same law). */
static void two_valves_on_one_resistor(void **state)
{
    (void)state;
    struct stage_circuit c[2] = {stage_of("6V6GT", "A1-250", 262.5, 262.5),
                                 stage_of("6V6GT", "A1-250", 262.5, 262.5)};
    for (int i = 0; i < 2; i++) {
        c[i].cathode_ohm = 126.3;
        c[i].cathode_node = 7;
        c[i].grid_leak_ohm = 470e3;
    }
    struct stage_solution quiet[2], leaking[2];
    assert_int_equal(stages_solve(c, 2, quiet), SOLVE_OK);
    assert_relative(quiet[0].cathode_a, quiet[1].cathode_a, 1e-9);
    c[0].return_v = 6.25;
    assert_int_equal(stages_solve(c, 2, leaking), SOLVE_OK);
    assert_close(leaking[0].cathode_a / quiet[0].cathode_a - 1, 0.427, 0.0005);
    assert_close(leaking[1].cathode_a / quiet[1].cathode_a - 1, -0.163, 0.0005);
}

/* Grid-leak bias of a grounded-cathode 12AX7, 220 k, 10 M (ngspice on the same law). */
static void contact_bias(void **state)
{
    (void)state;
    struct stage_circuit c = stage_of("12AX7", "A1-250", 250, 0);
    c.anode_ohm = 220e3;
    c.grid_leak_ohm = 10e6;
    c.contact_bias = true;
    struct stage_solution s;
    stages_solve(&c, 1, &s);
    assert_close(s.grid_v, -1.125, 5e-4);
    c.coupling_source_v = 100;
    c.coupling_leak_s = 1e-9;
    stages_solve(&c, 1, &s);
    assert_close(s.grid_v, -0.993, 5e-4);
}

/* EL84, 470 k, 10 % of the 7.3 V bias: 1.55 uA, 64 M at 100 V (Ohm's law: 0.73 V / 470 k). */
static void el84_tenth_of_the_bias(void **state)
{
    (void)state;
    struct stage_circuit c = stage_of("EL84", "A-250", 250, 250);
    c.return_v = -7.3;
    c.grid_leak_ohm = 470e3;
    c.coupling_source_v = 100 - 6.57; /* so that 100 V stand across the leak at the limit */
    c.coupling_leak_s = 1.553e-6 / 100;
    struct stage_solution s;
    stages_solve(&c, 1, &s);
    assert_close(s.grid_v, -6.57, 5e-3);
    assert_close((c.coupling_source_v - s.grid_v) * c.coupling_leak_s, 1.55e-6, 5e-9);
    assert_close((c.coupling_source_v - s.grid_v) / 1.553e-6, 64e6, 0.5e6);
}

/* 1 uA through 500 k is 0.5 V (Ohm's law; the trade's rule of thumb). Well away from grid current.
 */
static void one_microampere_through_half_a_megohm(void **state)
{
    (void)state;
    struct stage_circuit c = stage_of("EL84", "A-250", 250, 250);
    c.return_v = -10;
    c.grid_leak_ohm = 500e3;
    c.coupling_source_v = 1e6 - 9.5;
    c.coupling_leak_s = 1e-12;
    struct stage_solution s;
    stages_solve(&c, 1, &s);
    assert_close(s.grid_v, -9.5, 1e-6);
}

/* Leaks as resistors in parallel: the same circuit written the other way (Thevenin's theorem). */
static void leaks_are_resistors(void **state)
{
    (void)state;
    struct stage_circuit leaking = stage_of("EF86", "250/140", 250, 250);
    leaking.anode_ohm = 220e3;
    leaking.screen_ohm = 1e6;
    leaking.cathode_ohm = 2.2e3;
    leaking.grid_leak_ohm = 1e6;
    leaking.screen_leak_s = 1 / 5e6;
    leaking.cathode_leak_s = 1 / 22e3;
    leaking.anode_leak_s = 1 / 2.2e6;
    struct stage_circuit same = leaking;
    same.screen_leak_s = same.cathode_leak_s = same.anode_leak_s = 0;
    same.cathode_ohm = 2.0e3;
    same.supply_v = 250 * 2.2e6 / (2.2e6 + 220e3);
    same.anode_ohm = 200e3;
    same.screen_supply_v = 250 * 5.0 / 6.0;
    same.screen_ohm = 5e6 / 6;
    struct stage_solution a, b;
    stages_solve(&leaking, 1, &a);
    stages_solve(&same, 1, &b);
    assert_relative(a.anode_a, b.anode_a, 1e-9);
    assert_relative(a.screen_v, b.screen_v, 1e-9);
    assert_relative(a.cathode_v, b.cathode_v, 1e-9);
    assert_relative(a.screen_resistor_w, (250 - a.screen_v) * (250 - a.screen_v) / 1e6, 1e-9);
}

/* Back bias: the grid returns to -R_b*(currents + others). Kirchhoff's law on the answer. */
static void back_bias(void **state)
{
    (void)state;
    struct stage_circuit c = stage_of("6V6GT", "A1-250", 250, 250);
    c.grid_leak_ohm = 470e3;
    c.bias_node = 0;
    c.bias_ohm = 165;
    c.bias_others_a = 26e-3;
    struct stage_solution s;
    assert_int_equal(stages_solve(&c, 1, &s), SOLVE_OK);
    assert_relative(s.return_v, -165 * (s.cathode_a + 26e-3), 1e-7);
    assert_relative(s.grid_v, s.return_v, 1e-6);
    assert_close(s.grid_v, -12.5, 0.1); /* 165 ohm * (49.5 + 26) mA = 12.46 V */
    double without_leak_v = s.return_v;
    c.bias_feed_ohm = 100e3;
    c.bias_leak_s = 1 / 900e3;
    stages_solve(&c, 1, &s);
    assert_true(s.return_v > without_leak_v);
    assert_relative(s.return_v, -0.9 * 165 * (s.anode_a + s.screen_a + 26e-3), 0.002);
    c.bias_node = -1;
    c.return_v = -12.5;
    stages_solve(&c, 1, &s);
    assert_relative(s.return_v, -11.25, 1e-12);
}

static void shared_dropper(void **state)
{
    (void)state;
    struct stage_circuit c[2] = {stage_of("6BA6", "250 Rk68", 250, 250),
                                 stage_of("6SJ7", "A1-250", 250, 250)};
    for (int i = 0; i < 2; i++) {
        c[i].screen_ohm = 33e3;
        c[i].screen_node = 3;
        c[i].grid_leak_ohm = 1e6;
    }
    c[0].cathode_ohm = 68;
    c[1].cathode_ohm = 800;
    c[0].screen_leak_s = 1 / 500e3;
    struct stage_solution s[2];
    assert_int_equal(stages_solve(c, 2, s), SOLVE_OK);
    assert_relative(s[0].screen_v, s[1].screen_v, 1e-12);
    double through_a = s[0].screen_a + s[1].screen_a + s[0].screen_v / 500e3;
    assert_relative(s[0].screen_v, 250 - 33e3 * through_a, 1e-8);
    assert_relative(s[1].screen_resistor_w, through_a * through_a * 33e3, 1e-7);
}

static void says_where_there_is_no_figure(void **state)
{
    (void)state;
    struct stage_circuit c = stage_of("EF86", "250/140", 250, 250);
    c.anode_ohm = 1e6;
    c.screen_ohm = 100e3;
    c.cathode_ohm = 500;
    struct stage_solution s;
    assert_int_equal(stages_solve(&c, 1, &s), SOLVE_BOTTOMED);
    assert_true(s.anode_v - s.cathode_v < 0.2 * (s.screen_v - s.cathode_v));
    c.return_v = -30;
    assert_int_equal(stages_solve(&c, 1, &s), SOLVE_BELOW_BOUNDS);
    assert_close(s.anode_a, 0, 1e-9);
    struct stage_solution before = s;
    c.screen_ohm = -1;
    assert_int_equal(stages_solve(&c, 1, &s), SOLVE_IMPOSSIBLE);
    assert_memory_equal(&before, &s, sizeof s);
    c.screen_ohm = 1e5;
    c.supply_v = 0;
    assert_int_equal(stages_solve(&c, 1, &s), SOLVE_IMPOSSIBLE);
    c.supply_v = NAN;
    assert_int_equal(stages_solve(&c, 1, &s), SOLVE_IMPOSSIBLE);
}

/* ---- random stages: every one must have its root, and the root must satisfy Kirchhoff */

static double uniform(uint64_t *seed)
{
    *seed = *seed * 6364136223846793005u + 1442695040888963407u;
    return (double)(*seed >> 11) / 9007199254740992.0;
}

static double between(uint64_t *seed, double low, double high)
{
    return low * pow(high / low, uniform(seed));
}

static struct stage_circuit random_stage(uint64_t *seed)
{
    size_t count;
    const struct valve_row *book = valve_book(&count);
    struct stage_circuit c = {.cathode_node = -1, .screen_node = -1, .bias_node = -1};
    enum law_status status;
    do {
        const struct valve_row *row = &book[(size_t)(uniform(seed) * (double)count)];
        status = valve_law_fit(row, &c.law);
    } while (status != LAW_OK && status != LAW_WARN_MU12);
    c.supply_v = c.law.va0_v * between(seed, 0.3, 2);
    c.screen_supply_v = c.law.triode ? 0 : c.law.vg20_v * between(seed, 0.3, 2.5);
    if (uniform(seed) < 0.8)
        c.anode_ohm = c.law.va0_v / c.law.ik0_a * between(seed, 0.003, 30);
    if (uniform(seed) < 0.7)
        c.screen_ohm = c.law.va0_v / c.law.ik0_a * between(seed, 0.01, 100);
    if (uniform(seed) < 0.8)
        c.cathode_ohm = c.law.va0_v / c.law.ik0_a * between(seed, 0.001, 3);
    c.grid_leak_ohm = between(seed, 1e4, 22e6);
    c.return_v = (uniform(seed) < 0.7 ? 1.5 : -1) * uniform(seed) * c.law.vg10_v;
    if (uniform(seed) < 0.7) {
        c.coupling_source_v = uniform(seed) * c.supply_v;
        c.coupling_source_ohm = between(seed, 1e3, 1e6);
        c.coupling_leak_s = between(seed, 1e-11, 1e-4);
    }
    if (uniform(seed) < 0.3)
        c.screen_leak_s = between(seed, 1e-9, 1e-3);
    if (uniform(seed) < 0.3)
        c.cathode_leak_s = between(seed, 1e-6, 1e-1);
    if (uniform(seed) < 0.3)
        c.anode_leak_s = between(seed, 1e-9, 1e-3);
    return c;
}

/* Kirchhoff's law at anode, screen, cathode and grid, with the currents taken afresh from the law
   at the answer's voltages; in parts of the volts at hand. */
static double worst_residual(const struct stage_circuit *c, const struct stage_solution *s)
{
    struct valve_currents law = valve_law_currents(
        &c->law, s->grid_v - s->cathode_v, s->screen_v - s->cathode_v, s->anode_v - s->cathode_v);
    double grid_a = valve_grid_current(s->grid_v - s->cathode_v);
    double worst = fabs(c->supply_v - s->anode_v -
                        c->anode_ohm * (law.anode_a + c->anode_leak_s * s->anode_v)) /
                   c->supply_v;
    if (!c->law.triode)
        worst = fmax(worst, fabs(c->screen_supply_v - s->screen_v -
                                 c->screen_ohm * (law.screen_a + c->screen_leak_s * s->screen_v)) /
                                c->screen_supply_v / (1 + c->screen_ohm * c->screen_leak_s));
    worst = fmax(worst,
                 fabs(c->cathode_ohm * (law.cathode_a + grid_a - c->cathode_leak_s * s->cathode_v) -
                      s->cathode_v) /
                     c->supply_v / (1 + c->cathode_ohm * c->cathode_leak_s));
    double leak_s = c->coupling_leak_s / (1 + c->coupling_leak_s * c->coupling_source_ohm);
    double coupling_a = leak_s * (c->coupling_source_v - s->grid_v);
    double ohm = c->grid_leak_ohm / (1 + c->grid_leak_ohm * leak_s);
    worst =
        fmax(worst, ohm * fabs(coupling_a - (s->grid_v - c->return_v) / c->grid_leak_ohm - grid_a) /
                        (c->supply_v + fabs(c->return_v)));
    return worst / (1 + c->anode_ohm * c->anode_leak_s);
}

static void twenty_thousand_random_stages(void **state)
{
    (void)state;
    uint64_t seed = 1951;
    size_t conducting = 0;
    for (int i = 0; i < 20000; i++) {
        struct stage_circuit c = random_stage(&seed);
        struct stage_solution s;
        enum solve_status status = stages_solve(&c, 1, &s);
        assert_int_not_equal(status, SOLVE_IMPOSSIBLE);
        assert_true(isfinite(s.grid_v) && isfinite(s.cathode_v) && isfinite(s.anode_v) &&
                    isfinite(s.anode_a) && isfinite(s.screen_a) && isfinite(s.grid_a) &&
                    isfinite(s.anode_w));
        assert_true(c.law.triode || isfinite(s.screen_v));
        assert_true(s.anode_a >= 0 && s.screen_a >= 0 && s.cathode_v >= 0);
        double residual = worst_residual(&c, &s);
        if (!(residual < 1e-9)) {
            print_error("stage %d: residual %g\n", i, residual);
            fail();
        }
        conducting += status == SOLVE_OK;
    }
    assert_true(conducting > 8000); /* the draw is of stages, not of dead ones */
}

/* Kirchhoff's law at a resistor that stages share: current through it and what they draw. */
static void check_shared(const struct stage_circuit *c, const struct stage_solution *s,
                         size_t count)
{
    for (int node = 0; node < 2; node++) {
        double cathode_a = 0, screen_a = 0, bias_a = 0.01;
        double cathode_leak_s = 0, screen_leak_s = 0;
        bool any_shared_screen = false;
        const struct stage_circuit *cathode = NULL, *screen = NULL, *bias = NULL;
        double cathode_v = 0, screen_v = 0, bias_v = 0;
        for (size_t j = 0; j < count; j++) {
            if (c[j].cathode_node == node) {
                cathode = cathode ? cathode : &c[j];
                cathode_v = s[j].cathode_v;
                cathode_a += s[j].cathode_a;
                cathode_leak_s = fmax(cathode_leak_s, c[j].cathode_leak_s);
            }
            if (c[j].screen_node == node && !c[j].law.triode) {
                screen = screen ? screen : &c[j];
                screen_v = s[j].screen_v;
                screen_a += s[j].screen_a;
                screen_leak_s = fmax(screen_leak_s, c[j].screen_leak_s);
            }
            if (c[j].bias_node == node) {
                bias = bias ? bias : &c[j];
                bias_v = c[j].return_v - s[j].return_v;
                bias_a += s[j].cathode_a + c[j].anode_leak_s * s[j].anode_v;
                if (!c[j].law.triode)
                    bias_a += c[j].screen_leak_s * s[j].screen_v;
                any_shared_screen = any_shared_screen || c[j].screen_node >= 0;
            }
        }
        if (cathode)
            assert_close(cathode_v, cathode->cathode_ohm * (cathode_a - cathode_leak_s * cathode_v),
                         1e-7 * (1 + cathode->cathode_ohm * cathode_leak_s));
        if (screen)
            assert_close(screen->screen_supply_v - screen_v,
                         screen->screen_ohm * (screen_a + screen_leak_s * screen_v),
                         1e-7 * (1 + screen->screen_ohm * screen_leak_s));
        if (bias && !any_shared_screen) /* whose leak counts once */
            assert_close(bias_v, bias->bias_ohm * bias_a, 1e-7);
    }
}

/* The same with up to six stages that share resistors at random, every one with its root. */
static void two_thousand_random_networks(void **state)
{
    (void)state;
    uint64_t seed = 1936;
    for (int i = 0; i < 2000; i++) {
        struct stage_circuit c[6];
        struct stage_solution s[6];
        size_t count = 2 + (size_t)(uniform(&seed) * 5);
        bool with_bias = uniform(&seed) < 0.2, with_screens = !with_bias || uniform(&seed) < 0.5;
        for (size_t j = 0; j < count; j++) {
            c[j] = random_stage(&seed);
            c[j].cathode_node = uniform(&seed) < 0.5 ? (int)(uniform(&seed) * 2) : -1;
            c[j].screen_node =
                with_screens && uniform(&seed) < 0.5 ? (int)(uniform(&seed) * 2) : -1;
            c[j].bias_node = with_bias ? 0 : -1;
            c[j].bias_ohm = 100;
            c[j].bias_others_a = 0.01;
        }
        assert_int_not_equal(stages_solve(c, count, s), SOLVE_IMPOSSIBLE);
        for (size_t j = 0; j < count; j++) {
            assert_true(isfinite(s[j].anode_a) && isfinite(s[j].cathode_v));
            for (size_t k = 0; k < j; k++) {
                if (c[j].cathode_node >= 0 && c[j].cathode_node == c[k].cathode_node)
                    assert_relative(s[j].cathode_v, s[k].cathode_v, 1e-12);
                if (c[j].bias_node == 0 && c[k].bias_node == 0)
                    assert_close(s[j].return_v - c[j].return_v, s[k].return_v - c[k].return_v,
                                 1e-9);
            }
        }
        check_shared(c, s, count);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(cathode_bias_with_grid_emf),
        cmocka_unit_test(without_emf_the_row_is_met),
        cmocka_unit_test(output_stage_to_five_figures),
        cmocka_unit_test(amplifier_to_five_figures),
        cmocka_unit_test(philips_ecc83_table),
        cmocka_unit_test(philips_ef86_table),
        cmocka_unit_test(telefunken_ef804s_table),
        cmocka_unit_test(two_valves_on_one_resistor),
        cmocka_unit_test(contact_bias),
        cmocka_unit_test(el84_tenth_of_the_bias),
        cmocka_unit_test(one_microampere_through_half_a_megohm),
        cmocka_unit_test(leaks_are_resistors),
        cmocka_unit_test(back_bias),
        cmocka_unit_test(shared_dropper),
        cmocka_unit_test(says_where_there_is_no_figure),
        cmocka_unit_test(twenty_thousand_random_stages),
        cmocka_unit_test(two_thousand_random_networks),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
