/* What the process table has lines for: which formulas, for which points and basins, and where each
 * argument comes from. One table; what is not in it is the plant's own (own.c). */
#ifndef WEIRBOOK_PROCESS_PLANS_H
#define WEIRBOOK_PROCESS_PLANS_H

#include "process/lines.h"

/* For what a formula has lines. */
enum extent {
    FOR_LOAD,     /* each strength at each point of the liquid and sludge streams */
    FOR_STAGE,    /* each strength measured before and after a stage */
    FOR_POINT,    /* each point of the roles */
    FOR_PASSAGE,  /* once, from where the passage starts to each place where it ends */
    FOR_BACTERIA, /* the same for each count of bacteria */
    FOR_BASIN,    /* each basin of the kinds */
    FOR_PLANT,    /* once */
    FOR_FOOD,     /* once for each measure of food */
    FOR_RETURN,   /* once, at the return */
    FOR_EFFLUENT  /* once, at the effluent */
};

enum passage {
    THROUGH_AERATION,   /* primary effluent, else influent, to secondary effluent, else effluent */
    THROUGH_CHLORINE,   /* secondary effluent to effluent */
    THROUGH_DIGESTION,  /* digester feed to digested sludge, else digester */
    THROUGH_DEWATERING, /* digested sludge to cake */
    PASSAGES
};

/* A dechlorinating chemical counts as in use where a chemical point is named for it. */
enum chemical { CHEMICAL_ANY, CHEMICAL_BISULFITE, CHEMICAL_SULFUR_DIOXIDE };

enum supply {
    SUPPLY_NONE,
    /* of the point, the stage or the basin a line is about */
    SUPPLY_STRENGTH_HERE,
    SUPPLY_FLOW_HERE,
    SUPPLY_BEFORE,
    SUPPLY_AFTER,
    SUPPLY_VOLUME,
    SUPPLY_AREA,
    SUPPLY_WEIR,
    SUPPLY_BASIN_SOLIDS, /* its volume, and its mixed liquor solids */
    SUPPLY_FOOD,         /* flow to aeration, and its strength in the line's parameter */
    SUPPLY_FOOD_LEFT,    /* flow out, and its strength in the line's parameter */
    SUPPLY_THROUGH,      /* flow through a basin: its point's meter, else a part of the plant's */
    /* of the plant */
    SUPPLY_PLANT_FLOW,
    SUPPLY_OUT_FLOW,
    SUPPLY_RETURN_FLOW,
    SUPPLY_RETURN_SOLIDS,
    SUPPLY_WASTE,
    SUPPLY_OUT_SOLIDS,
    SUPPLY_ENTERING,
    SUPPLY_AERATION,
    SUPPLY_VOLATILE,
    SUPPLY_MIXED_LIQUOR,
    SUPPLY_CLARIFIERS,
    SUPPLY_DIGESTERS,
    SUPPLY_CHLORINE,
    SUPPLY_POLYMER,
    SUPPLY_AIR,
    SUPPLY_GAS,
    SUPPLY_LOAD_FACTOR,
    /* of the feed itself */
    SUPPLY_READ,    /* a reading at the point, or where the passage starts */
    SUPPLY_READ_TO, /* where it ends */
    SUPPLY_READ_FILTRATE,
    SUPPLY_FALL,  /* the reading where the passage starts less that where it ends */
    SUPPLY_FIGURE /* what another plan gives, for the same point, passage or basin */
};

struct plan;

struct feed {
    const char *argument;
    enum supply supply;
    enum side side;
    bool shared;                        /* an even part for each basin of the kind in service */
    bool spare;                         /* the formula's default serves where it is not measured */
    const char *parameter, *or_else;    /* SUPPLY_READ...: built-in parameters, the first of them */
    const struct plan *figure, *lowers; /* SUPPLY_FIGURE; `lowers`: a percentage taken of it */
};

enum { FEEDS_MOST = 8 };

struct plan {
    const char *formula;
    enum extent extent;
    unsigned kinds; /* FOR_BASIN: which, as bits */
    unsigned roles; /* FOR_POINT: which, as bits */
    enum passage passage;
    const char *of;     /* the parameter the line is of; NULL: none */
    const char *unless; /* no line where the point has this parameter */
    enum chemical chemical;
    bool smoothed;
    const char *note;
    struct feed feed[FEEDS_MOST];
};

size_t plan_count(void);
const struct plan *plan_at(size_t i);

#endif
