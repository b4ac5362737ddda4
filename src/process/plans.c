/* The lines of the process table. */
#include "process/plans.h"

#include "base/poison.h"

#define KIND(k)    (1u << (k))
#define ROLE(r)    (1u << (r))
#define CLARIFIERS (KIND(BASIN_PRIMARY_CLARIFIER) | KIND(BASIN_SECONDARY_CLARIFIER))
#define ANYWHERE   ((1u << ROLES) - 1)
#define ENTERS     (ROLE(ROLE_INFLUENT) | ROLE(ROLE_PRIMARY_EFFLUENT))
#define LIQUID     (ENTERS | ROLE(ROLE_SECONDARY_EFFLUENT) | ROLE(ROLE_EFFLUENT))
#define STREAM     (LIQUID | ROLE(ROLE_UPSTREAM) | ROLE(ROLE_DOWNSTREAM))

/* Ways to feed an argument. */
#define TAKE(name, from)                                                                           \
    {                                                                                              \
        .argument = (name), .supply = (from)                                                       \
    }
#define STRENGTH_OF(name, from)                                                                    \
    {                                                                                              \
        .argument = (name), .supply = (from), .side = STRENGTH                                     \
    }
#define PART_OF(name, from)                                                                        \
    {                                                                                              \
        .argument = (name), .supply = (from), .shared = true                                       \
    }
#define READ(name, id)                                                                             \
    {                                                                                              \
        .argument = (name), .supply = SUPPLY_READ, .parameter = (id)                               \
    }
#define READ_TO(name, id)                                                                          \
    {                                                                                              \
        .argument = (name), .supply = SUPPLY_READ_TO, .parameter = (id)                            \
    }
#define READ_EITHER(name, id, other)                                                               \
    {                                                                                              \
        .argument = (name), .supply = SUPPLY_READ, .parameter = (id), .or_else = (other)           \
    }
#define READ_IF(name, id)                                                                          \
    {                                                                                              \
        .argument = (name), .supply = SUPPLY_READ, .parameter = (id), .spare = true                \
    }
#define FALL(name, id)                                                                             \
    {                                                                                              \
        .argument = (name), .supply = SUPPLY_FALL, .parameter = (id)                               \
    }
#define FIGURE(name, plan)                                                                         \
    {                                                                                              \
        .argument = (name), .supply = SUPPLY_FIGURE, .figure = &(plan)                             \
    }

#define FACTOR      TAKE("load_factor", SUPPLY_LOAD_FACTOR)
#define SOLIDS_HELD TAKE("volume", SUPPLY_AERATION), STRENGTH_OF("mlss", SUPPLY_AERATION)
#define WASTED      TAKE("waste_flow", SUPPLY_WASTE), STRENGTH_OF("waste_solids", SUPPLY_WASTE)
#define LOST                                                                                       \
    TAKE("effluent_flow", SUPPLY_OUT_SOLIDS), STRENGTH_OF("effluent_solids", SUPPLY_OUT_SOLIDS)

/* clang-format off */

/* ---- figures that go into others ---- */

static const struct plan bod_removed = {
    .formula = "load-removed", .extent = FOR_FOOD,
    .feed = {TAKE("flow", SUPPLY_FOOD), STRENGTH_OF("influent", SUPPLY_FOOD),
             STRENGTH_OF("effluent", SUPPLY_FOOD_LEFT), FACTOR}};
static const struct plan chlorine_dose = {
    .formula = "chlorine-dose", .extent = FOR_EFFLUENT,
    .feed = {TAKE("feed", SUPPLY_CHLORINE), TAKE("flow", SUPPLY_OUT_FLOW), FACTOR}};
static const struct plan contact_time = {
    .formula = "contact-time", .extent = FOR_BASIN, .kinds = KIND(BASIN_CONTACT),
    .note = "baffling factor 1",
    .feed = {TAKE("volume", SUPPLY_VOLUME), PART_OF("flow", SUPPLY_OUT_FLOW)}};
static const struct plan reactor_time = {
    .formula = "detention-time", .extent = FOR_BASIN, .kinds = KIND(BASIN_ULTRAVIOLET),
    .feed = {TAKE("volume", SUPPLY_VOLUME), TAKE("flow", SUPPLY_THROUGH)}};
static const struct plan ozone_dose = {
    .formula = "ozone-applied-dose", .extent = FOR_BASIN, .kinds = KIND(BASIN_OZONE),
    .feed = {READ("feed", "FEED"), TAKE("flow", SUPPLY_THROUGH), FACTOR}};
static const struct plan ozone_transfer = {
    .formula = "ozone-transfer-efficiency", .extent = FOR_BASIN, .kinds = KIND(BASIN_OZONE),
    .feed = {READ("feed_gas", "O3FEED"), READ("off_gas", "O3OFF")}};
static const struct plan volatile_fed = {
    .formula = "sludge-volatile-solids", .extent = FOR_PASSAGE, .passage = THROUGH_DIGESTION,
    .feed = {READ("volume", "FLOW"), READ("solids", "TS"), READ("volatile", "VS"), FACTOR}};
static const struct plan volatile_in = {
    .formula = "volatile-solids-concentration", .extent = FOR_PASSAGE,
    .passage = THROUGH_DIGESTION,
    .feed = {READ("mlss", "TS"), READ("volatile", "VS")}};
static const struct plan volatile_out = {
    .formula = "volatile-solids-concentration", .extent = FOR_PASSAGE,
    .passage = THROUGH_DIGESTION,
    .feed = {READ_TO("mlss", "TS"), READ_TO("volatile", "VS")}};
static const struct plan van_kleeck = {
    .formula = "volatile-solids-reduction-van-kleeck", .extent = FOR_PASSAGE,
    .passage = THROUGH_DIGESTION, .of = "VS",
    .feed = {READ("volatile_in", "VS"), READ_TO("volatile_out", "VS")}};
static const struct plan solids_to_press = {
    .formula = "sludge-solids", .extent = FOR_PASSAGE, .passage = THROUGH_DEWATERING,
    .feed = {READ("volume", "FLOW"), READ("solids", "TS"), FACTOR}};

/* ---- the table ---- */

static const struct plan plans[] = {
    /* loads and removals */
    {.formula = "mass-load", .extent = FOR_LOAD,
     .feed = {TAKE("flow", SUPPLY_FLOW_HERE), TAKE("concentration", SUPPLY_STRENGTH_HERE), FACTOR}},
    {.formula = "percent-removal", .extent = FOR_STAGE,
     .feed = {TAKE("influent", SUPPLY_BEFORE), TAKE("effluent", SUPPLY_AFTER)}},
    {.formula = "load-removed", .extent = FOR_FOOD,
     .feed = {TAKE("flow", SUPPLY_FOOD), STRENGTH_OF("influent", SUPPLY_FOOD),
              STRENGTH_OF("effluent", SUPPLY_FOOD_LEFT), FACTOR}},

    /* activated sludge */
    {.formula = "sludge-volume-index", .extent = FOR_POINT, .roles = ROLE(ROLE_AERATION),
     .feed = {READ("settled_volume", "SV30"), READ("mlss", "MLSS")}},
    {.formula = "diluted-sludge-volume-index", .extent = FOR_POINT, .roles = ROLE(ROLE_AERATION),
     .feed = {READ("settled_volume", "SV30D"), READ("dilution_factor", "DILUTION"),
              READ("mlss", "MLSS")}},
    {.formula = "solids-inventory", .extent = FOR_BASIN, .kinds = KIND(BASIN_AERATION),
     .feed = {TAKE("volume", SUPPLY_BASIN_SOLIDS), STRENGTH_OF("mlss", SUPPLY_BASIN_SOLIDS),
              FACTOR}},
    {.formula = "solids-inventory", .extent = FOR_PLANT, .feed = {SOLIDS_HELD, FACTOR}},
    {.formula = "food-to-microorganism", .extent = FOR_FOOD,
     .feed = {TAKE("flow", SUPPLY_FOOD), STRENGTH_OF("bod", SUPPLY_FOOD),
              TAKE("volume", SUPPLY_VOLATILE), STRENGTH_OF("mlvss", SUPPLY_VOLATILE)}},
    {.formula = "volumetric-organic-loading", .extent = FOR_FOOD,
     .feed = {TAKE("flow", SUPPLY_FOOD), STRENGTH_OF("bod", SUPPLY_FOOD),
              TAKE("volume", SUPPLY_AERATION), FACTOR}},
    {.formula = "solids-retention-time", .extent = FOR_PLANT, .smoothed = true,
     .feed = {SOLIDS_HELD, WASTED, LOST}},
    {.formula = "solids-retention-time-wasting-only", .extent = FOR_PLANT, .smoothed = true,
     .feed = {SOLIDS_HELD, WASTED}},
    {.formula = "mean-cell-residence-time", .extent = FOR_PLANT, .smoothed = true,
     .feed = {TAKE("aeration_volume", SUPPLY_AERATION), STRENGTH_OF("mlss", SUPPLY_AERATION),
              TAKE("clarifier_volume", SUPPLY_CLARIFIERS), WASTED, LOST}},
    {.formula = "sludge-age", .extent = FOR_PLANT, .smoothed = true,
     .feed = {SOLIDS_HELD, TAKE("flow", SUPPLY_ENTERING),
              STRENGTH_OF("primary_effluent_solids", SUPPLY_ENTERING)}},
    {.formula = "specific-oxygen-uptake-rate", .extent = FOR_POINT, .roles = ROLE(ROLE_AERATION),
     .feed = {READ("our", "OUR"), READ("mlvss", "MLVSS")}},
    {.formula = "air-per-pound-of-bod", .extent = FOR_FOOD,
     .feed = {TAKE("air", SUPPLY_AIR), FIGURE("bod_removed", bod_removed)}},
    {.formula = "return-ratio", .extent = FOR_RETURN,
     .feed = {TAKE("return_flow", SUPPLY_RETURN_FLOW), TAKE("flow", SUPPLY_PLANT_FLOW)}},
    {.formula = "return-flow-by-mass-balance", .extent = FOR_RETURN,
     .feed = {TAKE("flow", SUPPLY_PLANT_FLOW), STRENGTH_OF("mlss", SUPPLY_MIXED_LIQUOR),
              STRENGTH_OF("return_solids", SUPPLY_RETURN_SOLIDS),
              {.argument = "waste_flow", .supply = SUPPLY_WASTE, .spare = true}}},
    {.formula = "return-flow-by-settleability", .extent = FOR_POINT, .roles = ROLE(ROLE_AERATION),
     .feed = {TAKE("flow", SUPPLY_PLANT_FLOW), READ("settled_volume", "SV30")}},

    /* tanks */
    {.formula = "detention-time", .extent = FOR_BASIN,
     .kinds = KIND(BASIN_AERATION) | KIND(BASIN_ANOXIC), .note = "return flow not counted",
     .feed = {TAKE("volume", SUPPLY_VOLUME), PART_OF("flow", SUPPLY_PLANT_FLOW)}},
    {.formula = "detention-time", .extent = FOR_BASIN, .kinds = CLARIFIERS | KIND(BASIN_GRIT),
     .feed = {TAKE("volume", SUPPLY_VOLUME), PART_OF("flow", SUPPLY_PLANT_FLOW)}},
    {.formula = "detention-time-days", .extent = FOR_BASIN, .kinds = KIND(BASIN_LAGOON),
     .feed = {TAKE("volume", SUPPLY_VOLUME), PART_OF("flow", SUPPLY_PLANT_FLOW)}},
    {.formula = "surface-overflow-rate", .extent = FOR_BASIN, .kinds = CLARIFIERS,
     .feed = {PART_OF("flow", SUPPLY_PLANT_FLOW), TAKE("area", SUPPLY_AREA)}},
    {.formula = "weir-overflow-rate", .extent = FOR_BASIN, .kinds = CLARIFIERS,
     .feed = {PART_OF("flow", SUPPLY_PLANT_FLOW), TAKE("weir_length", SUPPLY_WEIR)}},
    {.formula = "solids-loading-rate", .extent = FOR_BASIN,
     .kinds = KIND(BASIN_SECONDARY_CLARIFIER),
     .feed = {PART_OF("flow", SUPPLY_PLANT_FLOW), PART_OF("return_flow", SUPPLY_RETURN_FLOW),
              STRENGTH_OF("mlss", SUPPLY_MIXED_LIQUOR), TAKE("area", SUPPLY_AREA), FACTOR}},

    /* nitrogen and phosphorus */
    {.formula = "total-nitrogen", .extent = FOR_POINT, .roles = STREAM, .unless = "NOXN",
     .feed = {READ("tkn", "TKN"), READ("nitrate", "NO3N"), READ_IF("nitrite", "NO2N")}},
    {.formula = "total-nitrogen", .extent = FOR_POINT, .roles = STREAM,
     .feed = {READ("tkn", "TKN"), READ("nitrate", "NOXN")}},
    {.formula = "organic-nitrogen", .extent = FOR_POINT, .roles = STREAM,
     .feed = {READ("tkn", "TKN"), READ("ammonia", "NH3N")}},
    {.formula = "total-inorganic-nitrogen", .extent = FOR_POINT, .roles = STREAM,
     .unless = "NOXN",
     .feed = {READ("ammonia", "NH3N"), READ("nitrate", "NO3N"), READ_IF("nitrite", "NO2N")}},
    {.formula = "total-inorganic-nitrogen", .extent = FOR_POINT, .roles = STREAM,
     .feed = {READ("ammonia", "NH3N"), READ("nitrate", "NOXN")}},
    {.formula = "bod-to-nutrient-ratio", .extent = FOR_POINT, .roles = ENTERS, .of = "TN",
     .feed = {READ_EITHER("bod", "BOD5", "CBOD5"), READ("nutrient", "TN")}},
    {.formula = "bod-to-nutrient-ratio", .extent = FOR_POINT, .roles = ENTERS, .of = "TKN",
     .unless = "TN",
     .feed = {READ_EITHER("bod", "BOD5", "CBOD5"), READ("nutrient", "TKN")}},
    {.formula = "bod-to-nutrient-ratio", .extent = FOR_POINT, .roles = ENTERS, .of = "TP",
     .feed = {READ_EITHER("bod", "BOD5", "CBOD5"), READ("nutrient", "TP")}},
    {.formula = "unionized-ammonia", .extent = FOR_POINT, .roles = ANYWHERE,
     .feed = {READ("ammonia", "NH3N"), READ("temperature", "TEMP"), READ("ph", "PH")}},
    {.formula = "nitrification-alkalinity-demand", .extent = FOR_PASSAGE,
     .passage = THROUGH_AERATION, .of = "NH3N",
     .note = "ammonia oxidized taken as its fall",
     .feed = {FALL("ammonia_oxidized", "NH3N")}},
    {.formula = "alkalinity-after-nitrification", .extent = FOR_PASSAGE,
     .passage = THROUGH_AERATION, .of = "NH3N",
     .note = "ammonia oxidized taken as its fall, no nitrate removed",
     .feed = {READ("alkalinity", "ALK"), FALL("ammonia_oxidized", "NH3N")}},
    {.formula = "alkalinity-supplement", .extent = FOR_PASSAGE,
     .passage = THROUGH_AERATION, .of = "NH3N",
     .note = "ammonia oxidized taken as its fall, no nitrate removed, 75 mg/L kept",
     .feed = {READ("alkalinity", "ALK"), FALL("ammonia_oxidized", "NH3N")}},

    /* disinfection */
    {.formula = "chlorine-dose", .extent = FOR_EFFLUENT,
     .feed = {TAKE("feed", SUPPLY_CHLORINE), TAKE("flow", SUPPLY_OUT_FLOW), FACTOR}},
    {.formula = "chlorine-demand", .extent = FOR_BASIN, .kinds = KIND(BASIN_CONTACT),
     .feed = {FIGURE("dose", chlorine_dose), READ_EITHER("residual", "TRC", "FRC")}},
    {.formula = "contact-time", .extent = FOR_BASIN, .kinds = KIND(BASIN_CONTACT),
     .note = "baffling factor 1",
     .feed = {TAKE("volume", SUPPLY_VOLUME), PART_OF("flow", SUPPLY_OUT_FLOW)}},
    {.formula = "contact-product", .extent = FOR_BASIN, .kinds = KIND(BASIN_CONTACT),
     .note = "baffling factor 1",
     .feed = {READ_EITHER("residual", "TRC", "FRC"), FIGURE("contact_time", contact_time)}},
    {.formula = "percent-kill", .extent = FOR_BACTERIA, .passage = THROUGH_CHLORINE,
     .feed = {TAKE("influent", SUPPLY_BEFORE), TAKE("effluent", SUPPLY_AFTER)}},
    {.formula = "log-removal", .extent = FOR_BACTERIA, .passage = THROUGH_CHLORINE,
     .feed = {TAKE("influent", SUPPLY_BEFORE), TAKE("effluent", SUPPLY_AFTER)}},
    {.formula = "sodium-bisulfite-feed", .extent = FOR_BASIN, .kinds = KIND(BASIN_CONTACT),
     .chemical = CHEMICAL_BISULFITE, .note = "need at 1.46 lb a lb of residual, as pure bisulfite",
     .feed = {PART_OF("flow", SUPPLY_OUT_FLOW), READ("residual", "TRC"), FACTOR}},
    {.formula = "sulfur-dioxide-feed", .extent = FOR_BASIN, .kinds = KIND(BASIN_CONTACT),
     .chemical = CHEMICAL_SULFUR_DIOXIDE, .note = "need at 1 lb a lb of residual",
     .feed = {PART_OF("flow", SUPPLY_OUT_FLOW), READ("residual", "TRC"), FACTOR}},
    {.formula = "ultraviolet-dose", .extent = FOR_BASIN, .kinds = KIND(BASIN_ULTRAVIOLET),
     .feed = {READ("intensity", "UVI"), FIGURE("time", reactor_time)}},
    {.formula = "ultraviolet-absorbance", .extent = FOR_POINT, .roles = ANYWHERE,
     .note = "path 1 cm", .feed = {READ("transmittance", "UVT")}},
    {.formula = "ozone-applied-dose", .extent = FOR_BASIN, .kinds = KIND(BASIN_OZONE),
     .feed = {READ("feed", "FEED"), TAKE("flow", SUPPLY_THROUGH), FACTOR}},
    {.formula = "ozone-transfer-efficiency", .extent = FOR_BASIN, .kinds = KIND(BASIN_OZONE),
     .feed = {READ("feed_gas", "O3FEED"), READ("off_gas", "O3OFF")}},
    {.formula = "ozone-transferred-dose", .extent = FOR_BASIN, .kinds = KIND(BASIN_OZONE),
     .feed = {FIGURE("applied_dose", ozone_dose), FIGURE("transfer_efficiency", ozone_transfer)}},

    /* filters, carbon, membranes */
    {.formula = "filtration-rate", .extent = FOR_BASIN, .kinds = KIND(BASIN_FILTER),
     .feed = {TAKE("flow", SUPPLY_THROUGH), TAKE("area", SUPPLY_AREA)}},
    {.formula = "filter-run-volume", .extent = FOR_BASIN, .kinds = KIND(BASIN_FILTER),
     .feed = {TAKE("flow", SUPPLY_THROUGH), READ("run_time", "RUNTIME"),
              TAKE("area", SUPPLY_AREA)}},
    {.formula = "backwash-share", .extent = FOR_BASIN, .kinds = KIND(BASIN_FILTER),
     .feed = {READ("backwash_volume", "BACKWASH"), TAKE("filtered_volume", SUPPLY_THROUGH)}},
    {.formula = "empty-bed-contact-time", .extent = FOR_BASIN, .kinds = KIND(BASIN_CARBON),
     .feed = {TAKE("bed_volume", SUPPLY_VOLUME), TAKE("flow", SUPPLY_THROUGH)}},
    {.formula = "carbon-use-rate", .extent = FOR_BASIN, .kinds = KIND(BASIN_CARBON),
     .feed = {READ("carbon", "CARBON"), TAKE("treated_volume", SUPPLY_THROUGH)}},
    {.formula = "membrane-flux", .extent = FOR_BASIN, .kinds = KIND(BASIN_MEMBRANE),
     .feed = {READ("permeate_flow", "PERMEATE"), TAKE("area", SUPPLY_AREA)}},
    {.formula = "membrane-recovery", .extent = FOR_BASIN, .kinds = KIND(BASIN_MEMBRANE),
     .feed = {READ("permeate_flow", "PERMEATE"), READ("feed_flow", "FLOW")}},
    {.formula = "membrane-rejection", .extent = FOR_BASIN, .kinds = KIND(BASIN_MEMBRANE),
     .of = "TDS", .feed = {READ("feed", "TDS"), READ("permeate", "TDSPERM")}},

    /* digestion */
    {.formula = "volatile-solids-reduction-van-kleeck", .extent = FOR_PASSAGE,
     .passage = THROUGH_DIGESTION, .of = "VS",
     .feed = {READ("volatile_in", "VS"), READ_TO("volatile_out", "VS")}},
    {.formula = "volatile-solids-reduction-mass-balance", .extent = FOR_PASSAGE,
     .passage = THROUGH_DIGESTION, .of = "VS",
     .note = "of one day; no decant; 1 % of solids taken as 10000 mg/L",
     .feed = {READ("feed_flow", "FLOW"), FIGURE("feed_volatile", volatile_in),
              READ_TO("product_flow", "FLOW"), FIGURE("product_volatile", volatile_out)}},
    {.formula = "digester-volatile-loading", .extent = FOR_PASSAGE,
     .passage = THROUGH_DIGESTION,
     .feed = {FIGURE("volatile_solids", volatile_fed), TAKE("volume", SUPPLY_DIGESTERS)}},
    {.formula = "digester-detention-time", .extent = FOR_PASSAGE, .passage = THROUGH_DIGESTION,
     .feed = {TAKE("volume", SUPPLY_DIGESTERS), READ("feed_flow", "FLOW")}},
    {.formula = "gas-yield", .extent = FOR_PASSAGE, .passage = THROUGH_DIGESTION,
     .note = "volatile solids destroyed by Van Kleeck's reduction",
     .feed = {TAKE("gas", SUPPLY_GAS),
              {.argument = "volatile_destroyed", .supply = SUPPLY_FIGURE,
               .figure = &volatile_fed, .lowers = &van_kleeck}}},
    {.formula = "volatile-acids-to-alkalinity", .extent = FOR_POINT,
     .roles = ROLE(ROLE_DIGESTER),
     .feed = {READ("volatile_acids", "VA"), READ("alkalinity", "ALK")}},

    /* dewatering */
    {.formula = "dewatering-capture", .extent = FOR_PASSAGE, .passage = THROUGH_DEWATERING,
     .of = "TS",
     .feed = {READ("feed", "TS"), READ_TO("cake", "TS"),
              {.argument = "centrate", .supply = SUPPLY_READ_FILTRATE, .parameter = "TS",
               .or_else = "TSS"}}},
    {.formula = "polymer-dose", .extent = FOR_PASSAGE, .passage = THROUGH_DEWATERING,
     .feed = {TAKE("polymer", SUPPLY_POLYMER), FIGURE("solids", solids_to_press)}},
    {.formula = "dry-tons", .extent = FOR_POINT, .roles = ROLE(ROLE_CAKE),
     .feed = {READ("wet_tons", "CAKE"), READ("cake", "TS")}},

    /* by volume treated */
    {.formula = "grit-removal", .extent = FOR_POINT, .roles = ANYWHERE,
     .feed = {READ("grit_volume", "GRIT"), TAKE("treated_volume", SUPPLY_PLANT_FLOW)}},
    {.formula = "screenings-removal", .extent = FOR_POINT, .roles = ANYWHERE,
     .feed = {READ("screenings_volume", "SCREENINGS"),
              TAKE("treated_volume", SUPPLY_PLANT_FLOW)}},
    {.formula = "hauled-waste-share", .extent = FOR_POINT, .roles = ANYWHERE,
     .feed = {READ("hauled_volume", "SEPTAGE"), TAKE("treated_volume", SUPPLY_PLANT_FLOW)}},
    {.formula = "cake-hauled-per-million-gallons", .extent = FOR_POINT, .roles = ROLE(ROLE_CAKE),
     .feed = {READ("hauled", "CAKE"), TAKE("treated_volume", SUPPLY_PLANT_FLOW)}},
    {.formula = "concentration-from-load", .extent = FOR_POINT, .roles = ROLE(ROLE_CHEMICAL),
     .of = "FEED", .note = "fed, over the effluent flow",
     .feed = {READ("load", "FEED"), TAKE("flow", SUPPLY_OUT_FLOW), FACTOR}},
    {.formula = "power-use-per-million-gallons", .extent = FOR_POINT, .roles = ANYWHERE,
     .feed = {READ("energy", "ENERGY"), TAKE("treated_volume", SUPPLY_PLANT_FLOW)}},
};
/* clang-format on */

size_t plan_count(void)
{
    return NELEM(plans);
}

const struct plan *plan_at(size_t i)
{
    return &plans[i];
}
