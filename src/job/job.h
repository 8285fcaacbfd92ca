/*
 * A job: one set on the bench, as its file says it. Plain data, const once read.
 *
 * Every pointer belongs to the arena given to job_read. Text is valid UTF-8 without control
 * characters (line ends and tabs excepted); NULL: not given. A struct quantity, date ... with
 * set == false: not given. Lists are in the order of the file.
 */
#ifndef JOB_JOB_H
#define JOB_JOB_H

#include "base/arena.h"
#include "base/diagnostic.h"
#include "job/choices.h"
#include "quantity/quantity.h"

#include <stdbool.h>
#include <stddef.h>

/* Free text and where it stands. text == NULL: not given. */
struct prose {
    const char *text;
    struct position at;
};

/* `key: text` pairs, where a section is free in its keys (removed, hazards ...). */
struct named_prose {
    const char *name;
    struct prose value;
};

enum { NOT_LISTED = -1 };

/*
 * A resistance: a value, or the ref of a listed resistor or winding.
 * resistor, winding: index into the job's list, or NOT_LISTED. Neither: `quantity` holds it.
 */
struct resistance {
    bool set;
    struct quantity quantity; /* the value as typed; with a ref, only `written` and `at` */
    int resistor;
    int winding;
};

/* The three states of a stage. */
enum phase { PHASE_DESIGNED, PHASE_FOUND, PHASE_LEFT, PHASE_COUNT };

/* What is written on a part, or was fitted. */
struct marking {
    bool set;
    const char *written;
    struct position at;
    enum dielectric type;          /* `fitted` only; UNKNOWN in `marked` */
    const char *other_words;       /* words that are no type and no class ("carbon film") */
    struct quantity value;         /* F or ohm */
    struct quantity rated;         /* V; of a resistor W */
    bool rated_ac;                 /* `310 V a.c.` */
    double tolerance_low_percent;  /* -20 for -20/+100 %; 0 with tolerance_set false */
    double tolerance_high_percent; /* +100 */
    bool tolerance_set;
    enum safety_class safety_class;
    unsigned class_count;   /* 2 for `two Y2 in series`; else 1 */
    struct dimensions size; /* of `fitted`, when given */
    const char *colours;    /* the colours that value and tolerance were read from; NULL: none */
    bool colours_unknown;   /* no table has them: the value is not known from them */
};

/* Which state of the part a reading shows. */
enum reading_state { READING_FOUND, READING_REFORMED, READING_LEFT };

/* One reading. A line of several gives several; what is not repeated is carried on. */
struct reading {
    struct position at;
    const char *written; /* the words of this reading */
    unsigned line;       /* which line of `readings`, from 0: one run under voltage */
    enum reading_state state;
    struct quantity set_volts; /* V */
    struct quantity time;      /* s since the volts were set; {0}: not said */
    struct quantity value;     /* A or ohm; may be a bound */
    struct quantity hot;       /* C; {0}: bench temperature */
    bool in_circuit;
    struct date date;
    int instrument; /* index into the job's instruments */
};

/* What a part turned out to be worth by measurement. */
struct measured_capacitor {
    bool set;
    const char *written;
    struct position at;
    struct quantity value;     /* F */
    struct quantity esr;       /* ohm */
    struct quantity tan_delta; /* per cent */
};

struct capacitor {
    const char *ref;
    struct position at;
    int can; /* index into cans, NOT_LISTED: a part by itself */
    enum dielectric type;
    const char *maker;
    struct marking marked;
    struct prose date_code;
    enum seen seen;
    enum origin was;
    enum place place;
    struct position place_at;
    const int *stages; /* indices into the job's stages */
    size_t stage_count;
    struct position stages_at;
    struct quantity source_volts;        /* coupling, avc feed: `source: 90 V 220k` */
    struct resistance source_resistance; /* {0}: work it out, or 0 */
    struct position source_at;
    struct resistance feed;    /* ohm, d.c., that the place hangs on */
    const char *line;          /* name of the AVC line */
    struct quantity delay;     /* V of the AVC delay */
    struct quantity current;   /* A: of the HT line, the rail or the battery */
    struct prose rule;         /* name of the leakage rule */
    struct quantity ripple;    /* Hz */
    struct quantity circuit;   /* ohm: tuning */
    struct quantity shift;     /* V or per cent: other */
    struct quantity hum_found; /* V a.c. measured across it: reservoir, smoothing */
    struct quantity hum_left;
    struct quantity service;    /* V: highest d.c. in service, when given */
    bool near_heat;             /* within 50 mm of an output valve, rectifier or dropper */
    bool pulse;                 /* vibrator timing, buffer: no d.c. reading passes */
    struct quantity pulse_peak; /* V peak there */
    bool plug_side;             /* across mains: on the plug's side of the switch */
    const struct reading *readings;
    size_t reading_count;
    struct measured_capacitor measured;
    struct dimensions case_size;
    enum action done;
    struct position done_at;
    struct marking fitted;
    enum age age;
    const char *batch;
    struct prose signed_where;
    struct prose price;
    struct prose reason;
    struct prose note;
};

/* Several sections in one can: one part. Electrical facts are the sections'. */
struct can {
    const char *ref;
    struct position at;
    const int *holds; /* indices into capacitors */
    size_t hold_count;
    const char *maker;
    enum seen seen;
    enum origin was;
    enum action done;
    struct marking fitted;
    enum age age;
    struct prose date_code;
    struct dimensions case_size;
    struct prose signed_where;
    const char *batch;
    struct prose price;
    struct prose reason;
    struct prose note;
};

struct resistor {
    const char *ref;
    struct position at;
    const char *maker;
    struct marking marked;
    struct quantity measured; /* ohm; `open` is BOUND_OVER */
    struct quantity volts;    /* V across it in the working set */
    enum seen seen;
    enum origin was;
    enum action done;
    struct marking fitted;
    enum age age;
    struct prose date_code;
    const char *batch;
    struct prose price;
    struct prose reason;
    struct prose note;
};

/* Transformers, chokes, coils, speakers' fields. */
struct winding {
    const char *ref;
    struct position at;
    const char *maker;
    struct marking marked;       /* ohm at 20 C as the service sheet gives it */
    struct quantity measured;    /* ohm */
    struct quantity temperature; /* C of the winding when measured; {0}: bench */
    struct quantity insulation;  /* ohm to chassis or core */
    struct quantity inductance;  /* H, of a smoothing choke */
    enum seen seen;
    enum origin was;
    enum action done;
    struct marking fitted;
    enum age age;
    const char *batch;
    struct prose price;
    struct prose reason;
    struct prose note;
};

/* Switches and controls, counted with the original parts. */
struct control {
    const char *ref;
    struct position at;
    struct prose what; /* "volume, 500k with switch" */
    enum seen seen;
    enum origin was;
    enum action done;
    struct prose fitted;
    enum age age;
    struct prose price;
    struct prose reason;
};

struct valve {
    const char *ref;
    struct position at;
    const char *type; /* "6V6GT"; said here or in a stage */
    const char *maker;
    struct prose tested; /* "78 %", "24 mA of 32 mA" by the named instrument */
    struct prose date_code;
    enum seen seen;
    enum origin was;
    enum action done;
    struct prose fitted;
    struct prose price;
    struct prose reason;
};

/* A row of the valve manual given in the job: named values. */
struct given_row {
    bool set;
    const char *written;
    struct position at;
    struct quantity va, vg2, vg1, ia, ig2, gm, mu, ra; /* V, V, V, A, A, S, 1, ohm */
    struct quantity pa_max, pg2_max;                   /* W */
    struct prose source;                               /* row_source */
};

/* What a meter showed at a stage, volts to chassis. */
struct stage_reading {
    bool set;
    const char *written;
    struct position at;
    struct quantity grid, cathode, anode, screen;
    bool parts_lifted; /* taken with the leaking parts lifted: `lifted` */
};

enum bias_kind {
    BIAS_CATHODE, /* `cathode` resistance */
    BIAS_FIXED,   /* volts at the far end of the grid leak */
    BIAS_CONTACT, /* grounded cathode, grid leak of megohms */
    BIAS_BACK     /* a resistance in the negative HT lead */
};

struct stage {
    const char *name;
    struct position at;
    const char *valve_ref;  /* "V4" */
    const char *valve_type; /* "6V6GT", "ECL82 triode" */
    struct position valve_at;
    const char *row_name; /* a row's name in the valve book; NULL: the nearest */
    struct given_row row;
    struct quantity supply;        /* V */
    struct resistance anode;       /* d.c. resistance of the load; {0}: 0 ohm */
    struct quantity screen_volts;  /* V; {0}: the supply */
    struct resistance screen;      /* the dropper; {0}: 0 ohm */
    struct quantity screen_rating; /* W of the dropper */
    enum bias_kind bias;
    struct resistance cathode;
    struct quantity bias_volts; /* V, negative as a rule */
    struct resistance bias_resistance;
    struct quantity bias_others; /* A that the rest of the set sends through it */
    struct resistance grid_leak;
    enum stage_use use;
    const char *pushpull_with; /* name of the other stage; NULL: single-ended */
    struct stage_reading found, left;
};

/* Accuracy p % of reading + q % of full scale + a; SI. */
struct instrument {
    const char *name; /* its key: "leakage" */
    struct position at;
    const char *description; /* model, serial */
    bool accuracy_set;
    double accuracy_percent;
    double full_scale_percent;
    struct quantity full_scale;
    double accuracy_absolute; /* A, ohm or V: `accuracy_unit` */
    enum unit accuracy_unit;
    const char *accuracy_written;
    struct quantity resolution;
    struct quantity series;         /* ohm in series, inside the tester */
    struct quantity burden;         /* ohm of the meter itself, in series */
    struct quantity sensitivity;    /* ohm per volt of a voltmeter */
    struct quantity input;          /* ohm input resistance of a voltmeter */
    struct quantity supply_current; /* A: the most that the test supply gives */
    struct quantity volts_accuracy; /* per cent of the volts set */
    const double *volts_v;          /* what it can be set to; volt_count 0: anything */
    size_t volt_count;
    struct date compared; /* last compared against a reference */
};

struct photo {
    struct position at;
    const char *file;   /* relative to the job file */
    struct prose shows; /* caption or refs */
    struct prose caption;
    unsigned pair;    /* 0: single; two of one pair are before and after */
    bool after;       /* the second of its pair, or `when: after` */
    enum copy copies; /* widest copy that shows it: SALE all, CLIENT, SHOP */
    struct date taken;
};

struct reform {
    struct position at;
    int capacitor; /* index */
    struct date date;
    struct resistance limiter;
    const struct reading *log; /* `line` counts the steps */
    size_t log_count;
    bool across_part;     /* volts were read across the part, not set */
    struct quantity rest; /* s */
    const struct reading *after_rest;
    size_t after_rest_count;
    struct prose note;
};

/* A point of the service sheet: volts to chassis. */
struct voltage_point {
    const char *name; /* "V4 anode" */
    struct position at;
    struct quantity sheet;       /* V */
    struct quantity range;       /* V: the sheet's meter on this point */
    struct resistance source;    /* ohm seen from the point */
    struct quantity found, left; /* V */
};
struct voltages {
    struct quantity meter;       /* ohm per volt of the sheet's meter */
    struct quantity sheet_mains; /* V */
    struct quantity found_mains, left_mains;
    const struct voltage_point *points;
    size_t point_count;
};

struct performance_row {
    const char *name; /* "sensitivity 1 Mc/s" */
    struct position at;
    struct prose conditions;
    struct quantity found, left;
    const char *written_found, *written_left;
};

struct safety_row {
    const char *name; /* "touch current" */
    struct position at;
    const char *written;
    struct quantity value;  /* the worse, where two are given */
    struct quantity second; /* other polarity */
    struct quantity at_volts, time;
    struct prose conditions;
};

/* Originals that the job does not list, by kind. NOT given: set false. */
struct counts {
    bool set;
    struct position at;
    bool capacitors_set, resistors_set, windings_set, controls_set;
    unsigned capacitors, resistors, windings, controls;
};

struct job {
    struct source source;
    const char *number; /* "2031-014" */
    struct position number_at;
    struct {
        struct prose maker, model, chassis, serial, description;
        struct year_span year;
        enum supply supply;
        struct quantity mains;        /* V */
        struct quantity frequency;    /* Hz */
        struct quantity ht_secondary; /* V a.c., each half: no-load HT */
        bool full_wave, full_wave_set;
    } set;
    struct {
        struct prose name, contact;
    } owner;
    struct date received, returned;
    struct prose technician;
    struct {
        struct quantity bench, working, working_near_heat; /* C */
        struct quantity humidity;                          /* per cent */
    } conditions;
    struct prose arrival; /* condition on arrival */
    struct prose request, private_note, plan, approvals, work, not_done, hazards;
    const struct named_prose *removed;
    size_t removed_count;
    const struct instrument *instruments;
    size_t instrument_count;
    const struct stage *stages;
    size_t stage_count;
    const struct can *cans;
    size_t can_count;
    const struct capacitor *capacitors;
    size_t capacitor_count;
    const struct resistor *resistors;
    size_t resistor_count;
    const struct winding *windings;
    size_t winding_count;
    const struct control *controls;
    size_t control_count;
    const struct valve *valves;
    size_t valve_count;
    struct counts counts;
    const struct photo *photos;
    size_t photo_count;
    const struct reform *reforms;
    size_t reform_count;
    struct voltages voltages;
    const struct performance_row *performance;
    size_t performance_count;
    const struct safety_row *safety;
    size_t safety_count;
    struct prose continues; /* number of the earlier visit */
    struct date call_back;  /* look at it again by then */
};

/* Bounds on input. */
enum {
    JOB_BYTES_MAX = 4 << 20,
    JOB_PROSE_BYTES_MAX = 64 << 10,
    JOB_DEPTH_MAX = 32,
    JOB_KEYS_MAX = 20000
};

/*
 * Read the job in source->text. All mistakes of the file are appended to diagnostics. The job is
 * always returned; when diagnostics->errors grew it holds what could be read and must not be
 * published. source->path's file name must be the job's number.
 */
const struct job *job_read(const struct source *source, struct arena *arena,
                           struct diagnostics *diagnostics);

/* Letters, digits, '.' and '-', beginning with a letter or digit; 64 at the most. */
bool job_number_is_valid(const char *number);

/* A shallow copy without what this copy of the record may not show (owner, private, prices ...). */
const struct job *job_for_copy(const struct job *job, enum copy copy, struct arena *arena);

/* Ohms of a resistance in a phase: designed is `marked`, found `measured`, left `fitted` or else
   `measured`; each falls back on the one before. false when nothing is known. *measured tells
   whether the figure was measured. */
bool job_resistance(const struct job *job, const struct resistance *resistance, enum phase phase,
                    double *ohm, bool *measured);

#endif
