#include "report/shown_text.h"

struct visitor {
    shown_text_visitor *visit;
    void *data;
};

static void show(const struct visitor *visitor, const char *text, struct position at,
                 const char *what)
{
    if (text)
        visitor->visit(visitor->data, text, at, what);
}

static void show_prose(const struct visitor *visitor, const struct prose *prose, const char *what)
{
    show(visitor, prose->text, prose->at, what);
}

static void show_marking(const struct visitor *visitor, const struct marking *marking)
{
    if (marking->set)
        show(visitor, marking->written, marking->at, "a marking");
}

static void visit_set(const struct visitor *visitor, const struct job *job)
{
    const struct {
        const struct prose *prose;
        const char *what;
    } texts[] = {
        {&job->set.maker, "the maker"},
        {&job->set.model, "the model"},
        {&job->set.chassis, "the chassis"},
        {&job->set.serial, "the serial number"},
        {&job->set.description, "the description"},
        {&job->technician, "the technician"},
        {&job->arrival, "the condition on arrival"},
        {&job->plan, "the plan"},
        {&job->work, "the work"},
        {&job->not_done, "what was not done"},
        {&job->hazards, "the hazards"},
        {&job->continues, "the earlier visit"},
    };
    show(visitor, job->number, job->number_at, "the job number");
    for (size_t i = 0; i < sizeof texts / sizeof *texts; i++)
        show_prose(visitor, texts[i].prose, texts[i].what);
    for (size_t i = 0; i < job->removed_count; i++) {
        show(visitor, job->removed[i].name, job->removed[i].value.at, "the removed parts");
        show_prose(visitor, &job->removed[i].value, "the removed parts");
    }
}

static void visit_capacitors(const struct visitor *visitor, const struct job *job)
{
    for (size_t i = 0; i < job->capacitor_count; i++) {
        const struct capacitor *part = &job->capacitors[i];
        show(visitor, part->ref, part->at, "a ref");
        show(visitor, part->maker, part->at, "the maker of a part");
        show(visitor, part->line, part->at, "the line of a part");
        show(visitor, part->batch, part->at, "the batch of a part");
        show_marking(visitor, &part->marked);
        show_marking(visitor, &part->fitted);
        show_prose(visitor, &part->date_code, "a date code");
        show_prose(visitor, &part->rule, "a leakage rule");
        show_prose(visitor, &part->signed_where, "where a part is signed");
        show_prose(visitor, &part->reason, "a reason");
        show_prose(visitor, &part->note, "a note");
    }
    for (size_t i = 0; i < job->can_count; i++) {
        const struct can *can = &job->cans[i];
        show(visitor, can->ref, can->at, "a ref");
        show(visitor, can->maker, can->at, "the maker of a part");
        show(visitor, can->batch, can->at, "the batch of a part");
        show_marking(visitor, &can->fitted);
        show_prose(visitor, &can->date_code, "a date code");
        show_prose(visitor, &can->signed_where, "where a part is signed");
        show_prose(visitor, &can->reason, "a reason");
        show_prose(visitor, &can->note, "a note");
    }
}

static void visit_resistors(const struct visitor *visitor, const struct job *job)
{
    for (size_t i = 0; i < job->resistor_count; i++) {
        const struct resistor *part = &job->resistors[i];
        show(visitor, part->ref, part->at, "a ref");
        show(visitor, part->maker, part->at, "the maker of a part");
        show(visitor, part->batch, part->at, "the batch of a part");
        show_marking(visitor, &part->marked);
        show_marking(visitor, &part->fitted);
        show_prose(visitor, &part->date_code, "a date code");
        show_prose(visitor, &part->reason, "a reason");
        show_prose(visitor, &part->note, "a note");
    }
    for (size_t i = 0; i < job->winding_count; i++) {
        const struct winding *part = &job->windings[i];
        show(visitor, part->ref, part->at, "a ref");
        show(visitor, part->maker, part->at, "the maker of a part");
        show(visitor, part->batch, part->at, "the batch of a part");
        show_marking(visitor, &part->marked);
        show_marking(visitor, &part->fitted);
        show_prose(visitor, &part->reason, "a reason");
        show_prose(visitor, &part->note, "a note");
    }
}

static void visit_controls_and_valves(const struct visitor *visitor, const struct job *job)
{
    for (size_t i = 0; i < job->control_count; i++) {
        const struct control *part = &job->controls[i];
        show(visitor, part->ref, part->at, "a ref");
        show_prose(visitor, &part->what, "a control");
        show_prose(visitor, &part->fitted, "what was fitted");
        show_prose(visitor, &part->reason, "a reason");
    }
    for (size_t i = 0; i < job->valve_count; i++) {
        const struct valve *part = &job->valves[i];
        show(visitor, part->ref, part->at, "a ref");
        show(visitor, part->type, part->at, "the type of a valve");
        show(visitor, part->maker, part->at, "the maker of a part");
        show_prose(visitor, &part->tested, "the test of a valve");
        show_prose(visitor, &part->date_code, "a date code");
        show_prose(visitor, &part->fitted, "what was fitted");
        show_prose(visitor, &part->reason, "a reason");
    }
}

static void visit_stages(const struct visitor *visitor, const struct job *job)
{
    for (size_t i = 0; i < job->stage_count; i++) {
        const struct stage *stage = &job->stages[i];
        show(visitor, stage->name, stage->at, "the name of a stage");
        show(visitor, stage->valve_ref, stage->valve_at, "the valve of a stage");
        show(visitor, stage->valve_type, stage->valve_at, "the valve of a stage");
        show(visitor, stage->row_name, stage->at, "the row of a stage");
        show(visitor, stage->row.written, stage->row.at, "the row of a stage");
        show_prose(visitor, &stage->row.source, "the source of a row");
    }
    for (size_t i = 0; i < job->instrument_count; i++) {
        const struct instrument *instrument = &job->instruments[i];
        show(visitor, instrument->name, instrument->at, "the name of an instrument");
        show(visitor, instrument->description, instrument->at, "an instrument");
        show(visitor, instrument->accuracy_written, instrument->at, "an instrument");
    }
}

static void visit_measurements(const struct visitor *visitor, const struct job *job)
{
    for (size_t i = 0; i < job->voltages.point_count; i++)
        show(visitor, job->voltages.points[i].name, job->voltages.points[i].at,
             "the name of a voltage");
    for (size_t i = 0; i < job->performance_count; i++) {
        const struct performance_row *row = &job->performance[i];
        show(visitor, row->name, row->at, "a performance row");
        show(visitor, row->written_found, row->at, "a performance row");
        show(visitor, row->written_left, row->at, "a performance row");
        show_prose(visitor, &row->conditions, "the conditions of a performance row");
    }
    for (size_t i = 0; i < job->safety_count; i++) {
        const struct safety_row *row = &job->safety[i];
        show(visitor, row->name, row->at, "a safety row");
        show(visitor, row->written, row->at, "a safety row");
        show_prose(visitor, &row->conditions, "the conditions of a safety row");
    }
    for (size_t i = 0; i < job->reform_count; i++)
        show_prose(visitor, &job->reforms[i].note, "the note of a reform");
}

static void visit_photos(const struct visitor *visitor, const struct job *job)
{
    for (size_t i = 0; i < job->photo_count; i++) {
        const struct photo *photo = &job->photos[i];
        if (photo->copies != COPY_SALE)
            continue;
        show(visitor, photo->file, photo->at, "the file name of a photograph");
        show_prose(visitor, &photo->shows, "what a photograph shows");
        show_prose(visitor, &photo->caption, "the caption of a photograph");
    }
}

void shown_text_visit(const struct job *job, shown_text_visitor *visit, void *data)
{
    struct visitor visitor = {visit, data};
    visit_set(&visitor, job);
    visit_capacitors(&visitor, job);
    visit_resistors(&visitor, job);
    visit_controls_and_valves(&visitor, job);
    visit_stages(&visitor, job);
    visit_measurements(&visitor, job);
    visit_photos(&visitor, job);
}
