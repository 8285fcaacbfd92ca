/* What moved since the earlier visit. */
#include "write/json_pieces.h"

static void write_change(const struct visit_change *change, struct buffer *out)
{
    static const char *const kinds[] = {[VISIT_CAPACITOR] = "capacitor",
                                        [VISIT_RESISTOR] = "resistor",
                                        [VISIT_WINDING] = "winding"};
    json_open(out, NULL, '{');
    json_text_member(out, "ref", change->ref);
    json_text_member(out, "kind", kinds[change->kind]);
    json_choice_member(out, "done_then", action_text(change->done_then));
    json_number_member(out, "test_v", change->test_v);
    json_number_member(out, "then_a", change->then_a);
    json_text_member(out, "then_bound", json_bound(change->then_bound));
    json_number_member(out, "now_a", change->now_a);
    json_text_member(out, "now_bound", json_bound(change->now_bound));
    json_number_member(out, "then_s", change->then_s);
    json_number_member(out, "now_s", change->now_s);
    json_number_member(out, "then_value", change->then_value);
    json_number_member(out, "now_value", change->now_value);
    json_close(out, '}');
}

void json_write_visits(const struct findings *findings, struct buffer *out)
{
    const struct visit_changes *since = findings->since;
    if (!since) {
        json_text_member(out, "since", NULL);
        return;
    }
    json_open(out, "since", '{');
    json_text_member(out, "earlier", since->earlier);
    json_text_member(out, "then", since->then_date);
    json_text_member(out, "now", since->now_date);
    json_number_member(out, "years", since->years);
    json_open(out, "changes", '[');
    for (size_t i = 0; i < since->count; i++)
        write_change(&since->items[i], out);
    json_close(out, ']');
    json_close(out, '}');
}
