/* Meters, ripple, touch current, bleeding, temperature. */
#include "table.h"

#include "assess/mains.h"
#include "assess/reforming.h"
#include "assess/sheet_voltage.h"
#include "assess/supply.h"
#include "assess/temperature.h"
#include "assess/voltage.h"
#include "assess/winding.h"

static void rows_of_meters(void)
{
    static const struct origin_of_rows book = {
        "Meters", "Helfrick and Cooper, example 4-5, p. 62: 150 V, 100k over 50k, 50 V range",
        TRUST_SEEN};
    static const struct origin_of_rows two = {"Meters", "30 V across two 400k, 20 kohm/V on 20 V",
                                              TRUST_SEEN};
    static const struct origin_of_rows three = {
        "Meters", "250 V, 20k + 25k, 150 V range; outputs computed", TRUST_DERIVED};
    row_close(&book, "1000 ohm/V (V)", 30, meter_reading(50, 1e5 / 3, 50e3), 0.005);
    row_close(&book, "20 000 ohm/V (V)", 48.37, meter_reading(50, 1e5 / 3, 1e6), 0.02);
    row_close(&book, "true volts of 30 V read", 50, meter_true_volts(30, 1e5 / 3, 50e3), 1e-6);
    row_close(&two, "reading (V)", 10, meter_reading(15, 200e3, 400e3), 1e-6);
    row_close(&three, "500 ohm/V (V)", 120.968, meter_reading(250.0 * 25 / 45, 1e5 / 9, 75e3),
              0.001);
    row_close(&three, "1000 ohm/V (V)", 129.310, meter_reading(250.0 * 25 / 45, 1e5 / 9, 150e3),
              0.001);
}

static void rows_of_ripple(void)
{
    static const struct origin_of_rows malvino = {
        "Ripple", "Malvino and Bates, 7th ed., examples 4-6 to 4-8 (V peak to peak)", TRUST_SEEN};
    static const struct origin_of_rows power = {
        "Ripple", "Electrical Power Systems Technology, p. 196: 800 mA, 300 uF, 60 Hz (V rms)",
        TRUST_SEEN};
    static const struct origin_of_rows sections = {
        "Ripple", "encyclopaedia, Ripple (electrical): LC 0.829/(L*C) at 60 Hz, 10 H, 40 uF",
        TRUST_SEEN};
    double peak_v = 120 * sqrt(2) / 5;
    row_close(&malvino, "half wave", 1.1, supply_sawtooth(peak_v / 5e3, 60, 100e-6), 0.05);
    row_close(&malvino, "centre tap", 0.28, supply_sawtooth(peak_v / 2 / 5e3, 120, 100e-6), 0.005);
    row_close(&malvino, "bridge", 0.57, supply_sawtooth(peak_v / 5e3, 120, 100e-6), 0.005);
    row_close(&power, "sawtooth", 6.4, supply_sawtooth(0.8, 120, 300e-6) / (2 * sqrt(3)), 0.05);
    struct supply_section lc = {.series_h = 10, .capacitance_f = 40e-6, .load_ohm = INFINITY};
    row_relative(&sections, "ripple factor behind the choke", 0.002073,
                 sqrt(2) / 3 * supply_section_share(&lc, 120), 0.01);
}

static void rows_of_safety(void)
{
    static const struct origin_of_rows reasoning = {
        "Safety", "2 pi f C V, as the reasoning for Y capacitors has it (mA)", TRUST_SECOND_HAND};
    static const struct origin_of_rows textbook = {"Safety", "textbook: 100 nF on 240 V 50 Hz (mA)",
                                                   TRUST_SEEN};
    static const struct origin_of_rows residual = {
        "Safety", "V0*exp(-t/RC) to the figures of IEC 60204-1 and IEC 60335-1 (s)", TRUST_SEEN};
    row_close(&reasoning, "4700 pF 230 V 50 Hz", 0.33961,
              1e3 * mains_touch_current(230, 50, 4700e-12, 0), 1e-5);
    row_close(&reasoning, "0.01 uF 120 V 60 Hz", 0.4524,
              1e3 * mains_touch_current(120, 60, 0.01e-6, 0), 1e-4);
    row_close(&textbook, "touch current", 7.5, 1e3 * mains_touch_current(240, 50, 100e-9, 0), 0.05);
    row_close(&reasoning, "largest for 0.5 mA at 1.1 * 230 V 50 Hz (nF)", 6.29,
              1e9 * mains_touch_capacitance(1.1 * 230, 50, 0.5e-3), 0.005);
    row_close(&residual, "40 uF, 62.04k, 450 to 60 V", 5,
              reforming_bleed_time(62.04e3, 40e-6, 450, 60), 0.001);
    row_close(&residual, "0.1 uF, 4.175M, 373 to 34 V", 1,
              reforming_bleed_time(4.175e6, 0.1e-6, 373, 34), 0.001);
}

static void rows_of_temperature(void)
{
    static const struct origin_of_rows paper = {
        "Temperature", "insulation table of oil-filled transformers, 20 C as 1", TRUST_SEEN};
    static const struct origin_of_rows copper = {"Temperature", "copper, 0.393 % per kelvin",
                                                 TRUST_RECALLED};
    static const struct {
        const char *what;
        double warm_c, factor;
    } rows[] = {{"25 C", 25, 1.40},  {"30 C", 30, 1.98},  {"35 C", 35, 2.80},  {"40 C", 40, 3.95},
                {"45 C", 45, 5.60},  {"50 C", 50, 7.85},  {"55 C", 55, 11.20}, {"60 C", 60, 15.85},
                {"65 C", 65, 22.40}, {"70 C", 70, 31.75}, {"75 C", 75, 44.70}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++)
        row_relative(&paper, rows[i].what, rows[i].factor,
                     temperature_factor(DIELECTRIC_PAPER, 20, rows[i].warm_c, false), 0.05);
    row_close(&copper, "100 ohm at 70 C", 119.65, winding_at(100, 70), 0.001);
}

void rows_of_bench(void)
{
    rows_of_meters();
    rows_of_ripple();
    rows_of_safety();
    rows_of_temperature();
}
