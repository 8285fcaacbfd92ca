/* The reader: every section into its struct, and what must agree. */
#include "job/job.h"

#include "job/place_needs.h"
#include "kit.h"
#include "reading.h"

#include <stdlib.h>
#include <strings.h>

static const char whole[] =
    "job: 1\n"
    "set:\n  maker: Pellworth Wireless\n  serial: 014417\n  year: about 1951\n"
    "  supply: live chassis\n  mains: 230\n  frequency: 50 Hz\n  rectifier: half wave\n"
    "owner: {name: A. Client, contact: by post}\n"
    "received: 2031-02-03\nreturned: 2031-03-19\n"
    "conditions: {bench: 66.2 F, humidity: 48 %, working_near_heat: 55 C}\n"
    "instruments:\n"
    "  bridge: {accuracy: 1 % + 2 digits, resolution: 0.01 uA, series: 10k}\n"
    "  meter: {accuracy: 2 % + 0.02 uA, volts: '50 V, 100 V'}\n"
    "stages:\n"
    "  output:\n    valve: V4 6V6GT\n    anode: T2\n    cathode: R12\n    grid_leak: 470k\n"
    "    supply: 262.5 V\n    measured: {found: 'cathode 16.2 V, anode 238 V, lifted'}\n"
    "  first half: {valve: V3 ECL82 triode, cathode: R4, bias: contact}\n"
    "  mixer: {valve: 6SA7, screen: 250 V R4 1 W, bias: -3 V, pushpull_with: output}\n"
    "  tone: {valve: V9, bias: 80 ohm, others: 20 mA}\n"
    "cans:\n  CAN1: {holds: C20 C21, seen: above, done: reformed}\n"
    "capacitors:\n"
    "  C14:\n    type: waxed paper\n    marked: 0.02 uF 400 V 20 %\n    place: coupling\n"
    "    stage: output, first half\n    source: 90 V R4\n    near_heat: yes\n"
    "    readings:\n      - 100 V 60 s 1.1 uA, 5 min 0.9 uA\n      - 100 V 60 s 1 uA by meter\n"
    "    measured: 0.023 uF\n    done: restuffed\n    fitted: polypropylene 0.022 uF 630 V\n"
    "    price: 2.40\n"
    "  C20: {type: electrolytic, marked: 16 uF 450 V}\n  C21: {type: electrolytic}\n"
    "resistors:\n  R12: {marked: 270 ohm 1 W 10 %, measured: 266 ohm}\n  r4: {marked: 1 meg}\n"
    "windings:\n  T2: {marked: 310 ohm, measured: 316 ohm, insulation: over 100 M}\n"
    "controls:\n  VR1: {what: volume, done: kept}\n"
    "valves:\n  V4: {tested: 78 %}\n  V3: {done: kept}\n  V9: {type: EM80}\n"
    "counts: {capacitors: 0, resistors: 19}\n"
    "voltages:\n  meter: 1000 ohm/V\n  points:\n"
    "    V4 anode: sheet 248 V, range 500 V, source R12, found 255 V, left 257 V\n"
    "performance:\n  sensitivity: found dead, left 35 uV, for 50 mW out, at 30 %\n"
    "safety:\n  touch current: 0.05 mA, second 0.06 mA\n  insulation: 180 M at 500 V 60 s\n"
    "  insulation of T2: 180 M, second 90 M, warm\n"
    "photos:\n  - {file: a.jpg, pair: 1}\n  - {file: b.jpg, pair: 1, copies: shop}\n"
    "removed:\n  bag 1: C15\n"
    "reforms:\n  - capacitor: c20\n    date: 2031-02-10\n    limiter: 47k\n"
    "    volts: across the part\n    log: [50 V 30 s 170 uA, 100 V 60 s 9 uA]\n"
    "    rest: 12 h\n    after_rest: 440 V 5 min 2.0 mA\n"
    "call_back: 2036-01-01\n";

static void read_whole(struct reading_of_text *reading)
{
    read_text(reading, whole);
    if (reading->diagnostics.count)
        print_error("%u: %s\n", reading->diagnostics.items[0].at.line,
                    reading->diagnostics.items[0].text);
    assert_int_equal(reading->diagnostics.count, 0);
}

static void test_set_and_conditions(void **state)
{
    (void)state;
    struct reading_of_text reading;
    read_whole(&reading);
    const struct job *job = reading.job;
    assert_string_equal(job->number, "1");
    assert_string_equal(job->set.serial.text, "014417");
    assert_int_equal(job->set.year.first, 1951);
    assert_true(job->set.year.about);
    assert_int_equal(job->set.supply, SUPPLY_LIVE_CHASSIS);
    assert_close(job->set.mains.value, 230, 0);
    assert_true(job->set.full_wave_set && !job->set.full_wave);
    assert_close(job->conditions.bench.value, 19, 1e-9); /* 66.2 F */
    assert_false(job->conditions.working.set);
    assert_true(job->counts.set && job->counts.capacitors_set && job->counts.resistors_set);
    assert_false(job->counts.windings_set);
    assert_int_equal(job->counts.resistors, 19);
    assert_int_equal(job->call_back.year, 2036);
    assert_string_equal(job->removed[0].value.text, "C15");
    reading_release(&reading);
}

static void test_stages(void **state)
{
    (void)state;
    struct reading_of_text reading;
    read_whole(&reading);
    const struct job *job = reading.job;
    assert_int_equal(job->stage_count, 4);
    const struct stage *output = &job->stages[0], *half = &job->stages[1];
    const struct stage *mixer = &job->stages[2], *tone = &job->stages[3];
    assert_string_equal(output->valve_ref, "V4");
    assert_string_equal(output->valve_type, "6V6GT");
    assert_int_equal(output->anode.winding, 0);
    assert_int_equal(output->cathode.resistor, 0); /* R12 is a resistor, no 0.12 ohm */
    assert_false(output->cathode.quantity.set);
    assert_close(output->grid_leak.quantity.value, 470e3, 0);
    assert_true(output->found.set && output->found.parts_lifted && !output->left.set);
    assert_close(output->found.anode.value, 238, 0);
    assert_string_equal(half->valve_type, "ECL82 triode");
    assert_int_equal(half->bias, BIAS_CONTACT);
    assert_int_equal(half->cathode.resistor, 1); /* without regard to case */
    assert_string_equal(mixer->valve_type, "6SA7");
    assert_null(mixer->valve_ref);
    assert_int_equal(mixer->bias, BIAS_FIXED);
    assert_int_equal(mixer->screen.resistor, 1);
    assert_close(mixer->screen_rating.value, 1, 0);
    assert_string_equal(mixer->pushpull_with, "output");
    assert_string_equal(tone->valve_type, "EM80");
    assert_int_equal(tone->bias, BIAS_BACK);
    assert_close(tone->bias_resistance.quantity.value, 80, 0);
    assert_string_equal(job->valves[1].type, "ECL82");
    assert_string_equal(job->valves[0].type, "6V6GT");
    reading_release(&reading);
}

static void test_parts(void **state)
{
    (void)state;
    struct reading_of_text reading;
    read_whole(&reading);
    const struct job *job = reading.job;
    const struct capacitor *coupling = &job->capacitors[0];
    assert_int_equal(coupling->type, DIELECTRIC_WAXED_PAPER);
    assert_int_equal(coupling->place, PLACE_COUPLING);
    assert_int_equal(coupling->stage_count, 2);
    assert_int_equal(coupling->stages[1], 1);
    assert_close(coupling->source_volts.value, 90, 0);
    assert_int_equal(coupling->source_resistance.resistor, 1);
    assert_true(coupling->near_heat);
    assert_int_equal(coupling->reading_count, 3);
    assert_close(coupling->readings[1].set_volts.value, 100, 0); /* carried on */
    assert_close(coupling->readings[1].time.value, 300, 0);
    assert_int_equal(coupling->readings[1].line, 0);
    assert_int_equal(coupling->readings[2].line, 1);
    assert_int_equal(coupling->readings[0].instrument, 0);
    assert_int_equal(coupling->readings[2].instrument, 1);
    assert_int_equal(coupling->can, NOT_LISTED);
    assert_int_equal(job->capacitors[1].can, 0);
    assert_int_equal(job->cans[0].hold_count, 2);
    assert_int_equal(job->cans[0].holds[1], 2);
    assert_int_equal(job->reforms[0].capacitor, 1);
    assert_true(job->reforms[0].across_part);
    assert_int_equal(job->reforms[0].log_count, 2);
    assert_int_equal(job->reforms[0].log[1].line, 1);
    assert_int_equal(job->reforms[0].after_rest_count, 1);
    assert_int_equal(job->reforms[0].log[0].state, READING_REFORMED);
    reading_release(&reading);
}

static void test_instruments(void **state)
{
    (void)state;
    struct reading_of_text reading;
    read_whole(&reading);
    const struct instrument *bridge = &reading.job->instruments[0];
    const struct instrument *meter = &reading.job->instruments[1];
    assert_close(bridge->accuracy_percent, 1, 0);
    assert_close(bridge->accuracy_absolute, 0.02e-6, 1e-15); /* 2 digits of 0.01 uA */
    assert_int_equal(bridge->accuracy_unit, UNIT_CURRENT);
    assert_close(meter->accuracy_absolute, 0.02e-6, 1e-15);
    assert_int_equal(meter->volt_count, 2);
    assert_close(meter->volts_v[1], 100, 0);
    reading_release(&reading);
}

static void test_bench_sections(void **state)
{
    (void)state;
    struct reading_of_text reading;
    read_whole(&reading);
    const struct job *job = reading.job;
    const struct voltage_point *point = &job->voltages.points[0];
    assert_string_equal(point->name, "V4 anode");
    assert_close(point->range.value, 500, 0);
    assert_int_equal(point->source.resistor, 0);
    assert_close(point->left.value, 257, 0);
    const struct performance_row *row = &job->performance[0];
    assert_string_equal(row->written_found, "dead");
    assert_false(row->found.set);
    assert_close(row->left.value, 35e-6, 1e-12);
    assert_string_equal(row->conditions.text, "for 50 mW out, at 30 %");
    assert_close(job->safety[0].value.value, 0.06e-3, 1e-12); /* the worse */
    assert_close(job->safety[0].second.value, 0.05e-3, 1e-12);
    assert_close(job->safety[1].at_volts.value, 500, 0);
    assert_close(job->safety[1].time.value, 60, 0);
    assert_close(job->safety[2].value.value, 90e6, 0); /* of insulation the lower */
    assert_string_equal(job->safety[2].conditions.text, "warm");
    assert_false(job->photos[0].after);
    assert_true(job->photos[1].after);
    assert_int_equal(job->photos[0].copies, COPY_SALE);
    reading_release(&reading);
}

/* The text may be anything: a job comes back, and at least one mistake is told. */
static void test_not_a_job(void **state)
{
    (void)state;
    static const char *const texts[] = {"",
                                        "\n",
                                        "# x\n",
                                        "x",
                                        "- a\n- b\n",
                                        "[",
                                        "{",
                                        "'",
                                        "\"",
                                        "|",
                                        "\xFF",
                                        "a: *a",
                                        "? a",
                                        "? [a]: b",
                                        "{{a: b}: c}",
                                        "a:\n\tb",
                                        "---\n",
                                        "--- |\n",
                                        "%YAML 9.9\n--- x\n",
                                        "&a [*a]",
                                        "\xEF\xBB\xBF"};
    for (size_t i = 0; i < sizeof texts / sizeof *texts; i++) {
        struct reading_of_text reading;
        read_text(&reading, texts[i]);
        assert_non_null(reading.job);
        if (!reading.diagnostics.errors)
            print_error("no error for: %s\n", texts[i]);
        assert_true(reading.diagnostics.errors > 0);
        reading_release(&reading);
    }
}

static void expect_only(const char *text, enum diagnostic_code code, size_t times)
{
    struct reading_of_text reading;
    read_text(&reading, text);
    for (size_t i = 0; i < reading.diagnostics.count; i++) {
        if (reading.diagnostics.items[i].code != code)
            print_error("%s\n", reading.diagnostics.items[i].text);
    }
    assert_int_equal(reading.diagnostics.count, times);
    assert_int_equal(count_of(&reading.diagnostics, code), times);
    reading_release(&reading);
}

#define HEAD "job: 1\nset: {maker: x, mains: 230 V}\n"

/* A part without readings may lack anything; with one it must have what its place needs. */
static void test_place_needs(void **state)
{
    (void)state;
    char text[400];
    for (int place = PLACE_UNKNOWN + 1; place < PLACE_COUNT; place++) {
        const char *name = place_text((enum place)place);
        snprintf(text, sizeof text, HEAD "capacitors:\n  C1: {place: %s}\n", name);
        expect_only(text, DIAGNOSTIC_MISSING_KEY, 0);
        snprintf(text, sizeof text,
                 HEAD "capacitors:\n  C1: {place: %s, readings: 100 V 60 s 1 uA}\n", name);
        expect_only(text, DIAGNOSTIC_MISSING_KEY, place_is_mains((enum place)place) ? 0 : 1);
    }
}

/* A key that a repair took away is not missed. */
static void test_silence_about_damage(void **state)
{
    (void)state;
    expect_only(HEAD "capacitors:\n  C1:\n    place: coupling\n    stage: @x\n    source: 90 V\n"
                     "    readings: 100 V 60 s 1 uA\n",
                DIAGNOSTIC_YAML_NOTATION, 1);
    expect_only(HEAD "stages:\n  a:\n    anode: T1\nwindings:\n  T1: {marked: 5 ohm\n",
                DIAGNOSTIC_YAML_SYNTAX, 1);
    expect_only("job: 1\nset:\n  maker: a: b\n", DIAGNOSTIC_YAML_NOTATION, 1);
    expect_only("job: %1\nset: {maker: x}\n", DIAGNOSTIC_YAML_NOTATION, 1);
}

static void test_names_of_files(void **state)
{
    (void)state;
    static const struct {
        const char *path, *number;
        size_t errors;
    } rows[] = {
        {"a/2031-014.yaml", "2031-014", 0},
        {"2031-014.yaml", "2031-014", 0},
        {"2031-014.yml", "2031-014", 1},
        {"2031-014.yaml", "2031-01", 1},
        {"-", "2031-014", 0},
        {"a.yaml", "A", 1},
        {"../x.yaml", "../x", 1},
        {".x.yaml", ".x", 1},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct arena arena = {0};
        struct diagnostics diagnostics = diagnostics_in(&arena);
        char *text = arena_print(&arena, "job: %s\nset: {maker: x}\n", rows[i].number);
        struct source source = {rows[i].path, text, strlen(text)};
        job_read(&source, &arena, &diagnostics);
        assert_int_equal(diagnostics.errors, rows[i].errors);
        assert_int_equal(count_of(&diagnostics, DIAGNOSTIC_JOB_NAME), rows[i].errors);
        arena_release(&arena);
    }
}

/* A valve's ref and type, however they are said. */
static void test_valves(void **state)
{
    (void)state;
    static const struct {
        const char *text, *ref, *type;
    } rows[] = {
        {"V4 6V6GT", "V4", "6V6GT"},
        {"V3 ECL82 triode", "V3", "ECL82 triode"},
        {"V2a ECC83", "V2a", "ECC83"},
        {"6V6 GT", NULL, "6V6 GT"},
        {"EL 84", NULL, "EL 84"},
        {"EL84", NULL, "EL84"},
        {"ECL82 triode", NULL, "ECL82 triode"},
        {"PL1 EL84", "PL1", "EL84"},
        {"out 6V6", "OUT", "6V6"},
        {"V9", "V9", "EM80"},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        char text[200];
        struct reading_of_text reading;
        snprintf(text, sizeof text,
                 "job: 1\nset: {maker: x}\nstages: {a: {valve: %s}}\n"
                 "valves: {OUT: {done: kept}, V9: {type: EM80}}\n",
                 rows[i].text);
        read_text(&reading, text);
        assert_int_equal(reading.diagnostics.count, 0);
        const struct stage *stage = &reading.job->stages[0];
        assert_string_equal(stage->valve_type, rows[i].type);
        assert_int_equal(stage->valve_ref != NULL, rows[i].ref != NULL);
        if (rows[i].ref)
            assert_true(strcasecmp(stage->valve_ref, rows[i].ref) == 0);
        reading_release(&reading);
    }
}

/* The input is never written to. */
static void test_text_untouched(void **state)
{
    (void)state;
    char text[] = "job: 1\nset: {maker: x\nowner: a: b\n\xB5: 1\n";
    char *copy = strdup(text);
    struct reading_of_text reading;
    read_text(&reading, text);
    assert_string_equal(text, copy);
    reading_release(&reading);
    free(copy);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_set_and_conditions),
        cmocka_unit_test(test_stages),
        cmocka_unit_test(test_parts),
        cmocka_unit_test(test_instruments),
        cmocka_unit_test(test_bench_sections),
        cmocka_unit_test(test_not_a_job),
        cmocka_unit_test(test_place_needs),
        cmocka_unit_test(test_silence_about_damage),
        cmocka_unit_test(test_names_of_files),
        cmocka_unit_test(test_text_untouched),
        cmocka_unit_test(test_valves),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
