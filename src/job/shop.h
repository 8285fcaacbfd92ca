/*
 * shop.yaml: the shop, and its policy limits. Whatever is not given has the documented default.
 */
#ifndef JOB_SHOP_H
#define JOB_SHOP_H

#include "job/job.h"

enum page_size { PAGE_A4, PAGE_LETTER };

/* Limits that nobody published. Fractions: 0.10 is 10 %. Each is one key of shop.yaml. */
struct policy {
    double cathode_current_rise;    /* coupling, cathode and bias bypass; 0.10 */
    double dissipation_share;       /* of the rating that a leak may add unpunished; 0.05 */
    double pushpull_difference;     /* of one anode current; 0.10 */
    double grid_shift;              /* of the bias: voltage amplifiers; 0.10 */
    double avc_line_loss;           /* 0.05 */
    double avc_feed_v;              /* 0.2 V */
    double avc_feed_bias_share;     /* 0.10 of the least bias on the line */
    double screen_fall;             /* 0.05 */
    double screen_dropper_min_ohm;  /* 100: below, judged as decoupling */
    double rail_drop;               /* 0.02 */
    double ht_current_share;        /* 0.02 */
    double detector_control_v;      /* 0.010 V */
    double detector_grid_share;     /* 0.10 */
    double tuning_resistance_ratio; /* 20 */
    double battery_share;           /* 0.02 after the switch */
    double battery_before_switch_a; /* 10e-6 */
    double isolator_insulation_ohm; /* 100e6: classed mains parts */
    double touch_current_a;         /* 0.5e-3 */
    double ageing_margin_waxed;     /* 2: waxed and moulded paper */
    double ageing_margin_other;     /* 1 */
    double heat_paper_w;            /* 0.02 without a case size */
    double heat_can_w;              /* 0.25 */
    double heat_tubular_w;          /* 0.05 */
    double guard_band;              /* multiple of U; 1 */
    double instrument_share;        /* U above this share of the limit: not judged; 0.5 */
    double working_c;               /* 45 */
    double working_near_heat_c;     /* 55 */
    double mains_rise;              /* 1.1 */
    double voltage_tolerance;       /* 0.10: service-sheet volts */
    double repeatability;           /* 0.005 */
    double default_accuracy;        /* 0.03 + 1 digit, where the instrument says none */
    double volts_accuracy;          /* 0.01 */
    double reform_current_a;        /* 5e-3 ceiling */
    double reform_power_w;          /* 0.5 for a can */
    double winding_tolerance;       /* 0.15: windings without a marked tolerance */
    double valve_least;             /* 0.60 of the tester's own good figure */
    const char *leakage_rule;       /* "JAN-C-62" */
};

struct shop {
    struct source source;
    const char *name, *trade; /* "Repair and care of valve radios" */
    const char *address, *contact;
    const char *logo; /* path inside the archive */
    enum page_size page;
    const char *wording;              /* NULL, or "us": words-us.yaml laid over words.yaml */
    const char *accent, *accent_dark; /* "#1b4b6b" */
    struct policy policy;
    bool policy_changed[64]; /* by order of the field table: which differ from default */
};

/* The defaults alone. */
struct shop shop_default(void);

/* Read shop.yaml over the defaults. source->text NULL: the defaults. Always returned. */
const struct shop *shop_read(const struct source *source, struct arena *arena,
                             struct diagnostics *diagnostics);

#endif
