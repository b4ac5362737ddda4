/* Which point serves for what: flows, solids and strengths of the plant's streams, found by role.
 */
#ifndef WEIRBOOK_PROCESS_ROLES_H
#define WEIRBOOK_PROCESS_ROLES_H

#include "process/plans.h"
#include "process/supply.h"

/* A stream is NULL where the plant does not measure what it takes. Flows are in MGD, volumes in MG,
 * strengths in mg/L. */
struct roles {
    struct stream *plant_flow;      /* influent, else effluent */
    struct stream *out_flow;        /* effluent, else influent */
    struct stream *return_flow;     /* all return points */
    struct stream *waste;           /* waste flow and its solids */
    struct stream *out_solids;      /* effluent flow and its suspended solids */
    struct stream *entering;        /* flow to aeration and its suspended solids */
    struct stream *aeration;        /* volume in service and mixed liquor solids */
    struct stream *volatile_solids; /* volume in service and volatile mixed liquor solids */
    struct stream *mixed_liquor;    /* strength alone is used: solids that go to the clarifiers */
    struct stream *clarifiers;      /* volume of the secondary clarifiers in service */
    struct stream *return_solids;   /* strength alone is used: of the only return */
    struct stream *digesters;       /* volume of the digesters in service */
    struct stream *chlorine;        /* chemical fed, lb/d */
    struct stream *polymer;         /* chemical fed, lb/d */
    struct stream *air, *gas;       /* ft3/d, of all aeration points and all digesters */
    struct stream *load_factor;
    const char *plant_flow_at, *out_flow_at; /* where they are measured, "" where at several */
};

void roles_find(struct supplies *s, struct roles *out);

/* Flow to aeration with a strength of the parameter; NULL where it is not measured. */
struct stream *roles_entering(struct supplies *s, const struct roles *r, const char *parameter);
/* The effluents' flow with a strength of the parameter; of the only secondary effluent where an
 * effluent has none. NULL where neither is measured. */
struct stream *roles_leaving(struct supplies *s, const struct roles *r, const char *parameter);
/* The flow through a basin: of its point's meter where no other basin stands there, else the flow
 * out, of which each basin in service has an even part (`shared`). */
struct stream *roles_through(struct supplies *s, const struct roles *r, const char *basin,
                             int point, bool *shared);
/* Whether a chemical point is named for the chemical; true for any chemical. */
bool roles_has_chemical(const struct plant *p, enum chemical chemical);
/* The only point named for the liquor of dewatering, or -1. */
int roles_filtrate(const struct plant *p);
/* The flow that passes a point; NULL where none is known. `measured_at`: where it is measured. */
struct stream *roles_flow_past(struct supplies *s, const struct roles *r, int point,
                               const char **measured_at);
/* The point where a removal at `to` starts: the only influent, else the one of the same outfall,
 * else that of the rule `influent`; -1 where none serves. */
int roles_influent_for(const struct supplies *s, int to);
/* The only point of the role, or -1. */
int roles_only(const struct plant *p, enum role role);
/* A basin's point; where it names none, the only aeration point; else -1. */
int roles_basin_point(const struct plant *p, const struct basin *b);

enum measure { MEASURE_VOLUME, MEASURE_AREA, MEASURE_WEIR };
/* All rows of the basin as one stream, with the strength of the parameter at its point where one is
 * given; NULL when a row lacks the measure, or the strength. */
struct stream *roles_basin(struct supplies *s, const char *basin, enum measure measure,
                           const char *parameter, const struct unit *unit);
/* The plant's, lb/gal. */
struct stream *roles_load_factor(struct supplies *s);
/* One constant. */
struct stream *roles_number(struct supplies *s, const struct fraction *number);
struct stream *roles_reading(struct supplies *s, int point, int parameter, const struct unit *unit);

#endif
