/* words: qualifiers, no-data codes, the columns of long and raw values files and the reasons for
 * setting a row aside: each list once, for parser, book, manual and tests. */
#include "frame/frame.h"

#include "base/poison.h"

const char *const qualifier_words[QUALIFIERS] = {
    [QUALIFIER_PLAIN] = "plain",       [QUALIFIER_LESS] = "less",
    [QUALIFIER_GREATER] = "greater",   [QUALIFIER_DNQ] = "dnq",
    [QUALIFIER_DNQ_BARE] = "dnq-bare", [QUALIFIER_ESTIMATED] = "estimated",
    [QUALIFIER_CODE] = "code",         [QUALIFIER_WITHDRAWN] = "withdrawn",
};

/* The no-data indicators of EPA's monitoring report form, as the Tennessee and Arizona pages list
 * them. */
static const struct no_data_code codes[] = {
    {'C', CODE_NO_DISCHARGE, "no discharge"},
    {'9', CODE_NOT_REQUIRED, "conditional monitoring not required this period"},
    {'A', CODE_NOT_REQUIRED, "general-permit exemption"},
    {'F', CODE_NOT_REQUIRED, "insufficient flow for sampling"},
    {'7', CODE_NOT_REQUIRED, "no influent"},
    {'1', CODE_NOT_REQUIRED, "wrong flow"},
    {'2', CODE_NOT_REQUIRED, "operation shut down"},
    {'4', CODE_NOT_REQUIRED, "discharge to lagoon"},
    {'5', CODE_NOT_REQUIRED, "frozen conditions"},
    {'I', CODE_NOT_REQUIRED, "land applied"},
    {'J', CODE_NOT_REQUIRED, "recycled"},
    {'K', CODE_NOT_REQUIRED, "natural disaster"},
    {'N', CODE_NOT_REQUIRED, "not constructed"},
    {'S', CODE_NOT_REQUIRED, "fire conditions"},
    {'V', CODE_NOT_REQUIRED, "weather related"},
    {'W', CODE_NOT_REQUIRED, "dry lysimeter or well"},
    {'E', CODE_MISSED, "analysis not conducted"},
    {'D', CODE_MISSED, "lost sample"},
    {'X', CODE_MISSED, "parameter not reported"},
    {'G', CODE_MISSED, "sampling equipment failure"},
    {'H', CODE_MISSED, "invalid test"},
    {'M', CODE_MISSED, "laboratory error"},
    {'B', CODE_MISSED, "below detection, without a number"},
    {'Q', CODE_MISSED, "not quantifiable, without a number"},
};

const struct no_data_code *no_data_code(char code)
{
    for (size_t i = 0; i < NELEM(codes); i++)
        if (codes[i].code == code)
            return &codes[i];
    return NULL;
}

const char *const long_columns[LONG_COLUMNS] = {
    [LONG_DATE] = "date",
    [LONG_TIME] = "time",
    [LONG_POINT] = "point",
    [LONG_PARAMETER] = "parameter",
    [LONG_VALUE] = "value",
    [LONG_UNIT] = "unit",
    [LONG_SAMPLE] = "sample",
    [LONG_METHOD] = "method",
    [LONG_ANALYST] = "analyst",
    [LONG_COLLECTED_BY] = "collected_by",
    [LONG_ANALYZED] = "analyzed",
    [LONG_MDL] = "mdl",
    [LONG_RL] = "rl",
    [LONG_NOTE] = "note",
};

const char *const raw_columns[RAW_COLUMNS] = {
    [RAW_SHEET] = "sheet", [RAW_DATE] = "date", [RAW_TIME] = "time",
    [RAW_POINT] = "point", [RAW_RUN] = "run",   [RAW_ARGUMENT] = "argument",
    [RAW_VALUE] = "value", [RAW_UNIT] = "unit",
};

#define X(id, word, todo) [REASON_##id] = (word),
const char *const reason_words[REASON_COUNT] = {REASONS(X)};
#undef X
#define X(id, word, todo) [REASON_##id] = (todo),
const char *const reason_todo[REASON_COUNT] = {REASONS(X)};
#undef X
