#include "reference/source.h"

static const struct source_row rows[] = {
#define SOURCE(name, trust, key, title) [SOURCE_##name] = {key, trust, title},
#include "reference/source_rows.h"
#undef SOURCE
};

const struct source_row *source_row(enum source_key key)
{
    return &rows[key];
}

const char *trust_text(enum trust trust)
{
    switch (trust) {
    case TRUST_SEEN:
        return "seen";
    case TRUST_SECOND_HAND:
        return "second-hand";
    case TRUST_RECALLED:
        return "recalled";
    case TRUST_COMMON_PRACTICE:
        return "common practice";
    case TRUST_POLICY:
        return "shop policy";
    case TRUST_DERIVED:
        return "derived";
    }
    return "";
}
