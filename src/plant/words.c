/* words: the vocabulary of a plant description: the layouts of its files and the words of its
 * columns, each list once, for parser, help, reports and the book. */
#include "plant/plant.h"

#include <assert.h>

#include "base/poison.h"

static const struct plant_layout layouts[PLANT_FILES] = {
    [PLANT_FIELDS] = {"plant.csv", true, 2, 2, {"field", "value"}},
    [PLANT_POINTS] = {"points.csv", true, 4, 3, {"point", "name", "role", "outfall"}},
    [PLANT_PARAMETERS] = {"parameters.csv",
                          false,
                          12,
                          1,
                          {"parameter", "name", "unit", "decimals", "day_rule", "average", "code",
                           "low", "high", "mdl", "rl", "rules"}},
    [PLANT_BASINS] = {"basins.csv",
                      false,
                      11,
                      2,
                      {"basin", "kind", "point", "volume", "volume_unit", "area", "area_unit",
                       "weir", "weir_unit", "from", "to"}},
    [PLANT_LIMITS] = {"limits.csv",
                      true,
                      19,
                      8,
                      {"outfall", "point", "parameter", "basis", "statistic", "bound", "limit",
                       "unit", "season", "from", "to", "when", "samples", "sample", "allowed",
                       "ceiling", "group", "rules", "note"}},
    [PLANT_METERS] = {"meters.csv",
                      false,
                      7,
                      3,
                      {"point", "parameter", "kind", "rolls_at", "multiplier", "from", "to"}},
    [PLANT_PROCESS] = {"process.csv",
                       false,
                       7,
                       6,
                       {"name", "at", "parameter", "formula", "argument", "source", "unit"}},
    [PLANT_ROUND] = {"round.csv", false, 3, 2, {"point", "parameter", "sample"}},
};

const char *const role_words[ROLES] = {
    [ROLE_INFLUENT] = "influent",
    [ROLE_PRIMARY_EFFLUENT] = "primary-effluent",
    [ROLE_AERATION] = "aeration",
    [ROLE_SECONDARY_EFFLUENT] = "secondary-effluent",
    [ROLE_RETURN_SLUDGE] = "return-sludge",
    [ROLE_WASTE_SLUDGE] = "waste-sludge",
    [ROLE_EFFLUENT] = "effluent",
    [ROLE_UPSTREAM] = "upstream",
    [ROLE_DOWNSTREAM] = "downstream",
    [ROLE_DIGESTER_FEED] = "digester-feed",
    [ROLE_DIGESTER] = "digester",
    [ROLE_DIGESTED_SLUDGE] = "digested-sludge",
    [ROLE_CAKE] = "cake",
    [ROLE_CHEMICAL] = "chemical",
    [ROLE_OTHER] = "other",
};

const char *const basin_kind_words[BASIN_KINDS] = {
    [BASIN_AERATION] = "aeration",
    [BASIN_ANOXIC] = "anoxic",
    [BASIN_PRIMARY_CLARIFIER] = "primary-clarifier",
    [BASIN_SECONDARY_CLARIFIER] = "secondary-clarifier",
    [BASIN_CONTACT] = "contact",
    [BASIN_DIGESTER] = "digester",
    [BASIN_THICKENER] = "thickener",
    [BASIN_LAGOON] = "lagoon",
    [BASIN_GRIT] = "grit",
    [BASIN_FILTER] = "filter",
    [BASIN_MEMBRANE] = "membrane",
    [BASIN_CARBON] = "carbon",
    [BASIN_ULTRAVIOLET] = "ultraviolet",
    [BASIN_OZONE] = "ozone",
    [BASIN_DRYING_BED] = "drying-bed",
};

const char *const day_rule_words[DAY_RULES] = {
    [DAY_MEAN] = "mean",
    [DAY_FLOW_WEIGHTED] = "flow-weighted",
    [DAY_MAX] = "max",
    [DAY_MIN] = "min",
    [DAY_SUM] = "sum",
    [DAY_LAST] = "last",
    [DAY_GEOMETRIC] = "geometric",
};

const char *const average_words[AVERAGES] = {
    [AVERAGE_ARITHMETIC] = "arithmetic",
    [AVERAGE_GEOMETRIC] = "geometric",
};

const char *const basis_words[BASES] = {
    [BASIS_CONCENTRATION] = "concentration",
    [BASIS_LOAD] = "load",
    [BASIS_REMOVAL] = "removal",
    [BASIS_FLOW] = "flow",
    [BASIS_COUNT] = "count",
};

const char *const bound_words[BOUNDS] = {
    [BOUND_MAX] = "max",     [BOUND_MIN] = "min",       [BOUND_BELOW] = "below",
    [BOUND_ABOVE] = "above", [BOUND_REPORT] = "report", [BOUND_TARGET] = "target",
};

const char *const statistic_words[STATISTICS] = {
    [STAT_INSTANTANEOUS] = "instantaneous",
    [STAT_DAILY] = "daily",
    [STAT_WEEKLY_AVERAGE] = "weekly-average",
    [STAT_MONTHLY_AVERAGE] = "monthly-average",
    [STAT_ROLLING_7_DAY] = "rolling-7-day",
    [STAT_ROLLING_30_DAY] = "rolling-30-day",
    [STAT_MONTHLY_GEOMEAN] = "monthly-geomean",
    [STAT_WEEKLY_GEOMEAN] = "weekly-geomean",
    [STAT_MONTHLY_TOTAL] = "monthly-total",
    [STAT_QUARTERLY_AVERAGE] = "quarterly-average",
    [STAT_SEMIANNUAL_AVERAGE] = "semiannual-average",
    [STAT_ANNUAL_AVERAGE] = "annual-average",
    [STAT_ROLLING_12_MONTH] = "rolling-12-month",
    [STAT_ANNUAL_TOTAL] = "annual-total",
    [STAT_MONTHLY_MEDIAN] = "monthly-median",
    [STAT_PERCENTILE] = "percentile-N",
    [STAT_ROLLING_7_DAY_MEDIAN] = "rolling-7-day-median",
    [STAT_ROLLING_30_DAY_GEOMEAN] = "rolling-30-day-geomean",
    [STAT_MONTHLY_SAMPLES] = "monthly-samples",
    [STAT_QUARTERLY_SAMPLES] = "quarterly-samples",
    [STAT_ANNUAL_SAMPLES] = "annual-samples",
};

const char *const sample_type_words[SAMPLE_TYPES] = {
    [SAMPLE_ANY] = "any",
    [SAMPLE_GRAB] = "grab",
    [SAMPLE_COMPOSITE] = "composite",
    [SAMPLE_METER] = "meter",
};

const char *const meter_kind_words[METER_KINDS] = {
    [METER_TOTALIZER] = "totalizer",
    [METER_RATE] = "rate",
};

const struct plant_layout *plant_layout(enum plant_file file)
{
    assert((size_t)file < NELEM(layouts));
    return &layouts[file];
}

int plant_column(enum plant_file file, const char *name, const char **nearest)
{
    const struct plant_layout *layout = plant_layout(file);

    if (nearest)
        *nearest = NULL;
    for (size_t i = 0; i < layout->columns; i++)
        if (text_equal(layout->column[i], name))
            return (int)i;
    if (nearest)
        *nearest = text_nearest(name, layout->column, layout->columns);
    return -1;
}
