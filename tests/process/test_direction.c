/* Which way a figure goes when one of its arguments grows by a tenth, for the formulas the plant is
 * run by. The directions are those of the words: more load for more flow, less removal for more
 * left. Values are of an ordinary plant (common practice, no source). */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <stdlib.h>
#include <string.h>

#include "process/process.h"

static const struct {
    const char *formula;
    const char *rises, *falls; /* ARG=VALUE; the figure rises, or falls, with each */
} rows[] = {
    {"mass-load", "flow=2 concentration=200 load_factor=8.34", ""},
    {"load-removed", "flow=2 influent=200", "effluent=20"},
    {"percent-removal", "influent=200", "effluent=20"},
    {"concentration-from-load", "load=3336", "flow=2 load_factor=8.34"},
    {"sludge-volume-index", "settled_volume=250", "mlss=2500"},
    {"diluted-sludge-volume-index", "settled_volume=150 dilution_factor=2", "mlss=3000"},
    {"solids-inventory", "volume=1 mlss=2500", ""},
    {"food-to-microorganism", "flow=2 bod=140", "volume=1 mlvss=2000"},
    {"volumetric-organic-loading", "flow=2 bod=140", "volume=133000"},
    {"solids-retention-time", "volume=1 mlss=2500",
     "waste_flow=0.03 waste_solids=7500 effluent_flow=1.9 effluent_solids=11"},
    {"solids-retention-time-wasting-only", "volume=1 mlss=2500",
     "waste_flow=0.03 waste_solids=7500"},
    {"mean-cell-residence-time", "aeration_volume=1 clarifier_volume=0.25 mlss=2500",
     "waste_flow=0.03 waste_solids=7500 effluent_flow=1.9 effluent_solids=11"},
    {"sludge-age", "volume=1 mlss=2500", "flow=2 primary_effluent_solids=90"},
    {"specific-oxygen-uptake-rate", "our=36", "mlvss=2400"},
    {"air-per-pound-of-bod", "air=2000000", "bod_removed=3000"},
    {"return-ratio", "return_flow=1", "flow=2"},
    {"return-flow-by-mass-balance", "flow=2 mlss=3000", "return_solids=9000 waste_flow=0.03"},
    {"return-flow-by-settleability", "flow=2 settled_volume=300", ""},
    {"detention-time", "volume=1", "flow=2"},
    {"detention-time-days", "volume=40", "flow=2"},
    {"surface-overflow-rate", "flow=2", "area=2500"},
    {"weir-overflow-rate", "flow=2", "weir_length=180"},
    {"solids-loading-rate", "flow=2 return_flow=1 mlss=2500", "area=2500"},
    {"total-nitrogen", "tkn=4 nitrate=15 nitrite=1", ""},
    {"organic-nitrogen", "tkn=4", "ammonia=2"},
    {"total-inorganic-nitrogen", "ammonia=2 nitrate=15 nitrite=1", ""},
    {"bod-to-nutrient-ratio", "bod=200", "nutrient=40"},
    {"unionized-ammonia", "ammonia=2 temperature=20 ph=8", ""},
    {"nitrification-alkalinity-demand", "ammonia_oxidized=28", ""},
    {"alkalinity-after-nitrification", "alkalinity=300 nitrate_removed=5", "ammonia_oxidized=28"},
    {"chlorine-dose", "feed=83.4 strength=80", "flow=2"},
    {"chlorine-demand", "dose=5", "residual=1.5"},
    {"contact-time", "volume=0.05 baffling_factor=0.5", "flow=2"},
    {"contact-product", "residual=1.5 contact_time=36", ""},
    {"sodium-bisulfite-feed", "flow=2 residual=1.5 ratio=1.46", "strength=40"},
    {"sulfur-dioxide-feed", "flow=2 residual=1.5 ratio=1", ""},
    {"percent-kill", "influent=10000", "effluent=10"},
    {"log-removal", "influent=10000", "effluent=10"},
    {"ultraviolet-dose", "intensity=0.5 time=43", ""},
    {"ultraviolet-absorbance", "", "transmittance=60 path=1"},
    {"ozone-applied-dose", "feed=83.4", "flow=2"},
    {"ozone-transfer-efficiency", "feed_gas=100", "off_gas=10"},
    {"ozone-transferred-dose", "applied_dose=5 transfer_efficiency=90", ""},
    {"filtration-rate", "flow=1000", "area=250"},
    {"filter-run-volume", "flow=1000 run_time=24", "area=250"},
    {"backwash-share", "backwash_volume=28800", "filtered_volume=1440000"},
    {"empty-bed-contact-time", "bed_volume=1337", "flow=1000"},
    {"carbon-use-rate", "carbon=144", "treated_volume=1.44"},
    {"membrane-flux", "permeate_flow=750000", "area=50000"},
    {"membrane-recovery", "permeate_flow=520", "feed_flow=694"},
    {"membrane-rejection", "feed=1000", "permeate=50"},
    {"volatile-solids-reduction-van-kleeck", "volatile_in=75", "volatile_out=60"},
    {"volatile-solids-reduction-mass-balance", "feed_flow=10000 feed_volatile=30000",
     "product_flow=10000 product_volatile=15000"},
    {"digester-volatile-loading", "volatile_solids=2502", "volume=26700"},
    {"digester-detention-time", "volume=200000", "feed_flow=10000"},
    {"gas-yield", "gas=18765", "volatile_destroyed=1251"},
    {"volatile-acids-to-alkalinity", "volatile_acids=200", "alkalinity=2000"},
    /* A thicker cake is less of it: with as thin a centrate, more of the solids went there. */
    {"dewatering-capture", "feed=2.5", "cake=20 centrate=0.1"},
    {"polymer-dose", "polymer=20.85", "solids=2085"},
    {"dry-tons", "wet_tons=5 cake=20", ""},
    {"grit-removal", "grit_volume=4", "treated_volume=2"},
    {"screenings-removal", "screenings_volume=3", "treated_volume=2"},
    {"power-use-per-million-gallons", "energy=3000", "treated_volume=2"},
    {"chemical-cost-per-million-gallons", "use=20.85 price=2", "flow=2"},
};

enum { WORDS_MOST = FORMULA_ARGUMENTS_MOST };

/* Adds the words of a text; gives how many there are then. */
static size_t split(struct arena *a, const char *text, const char **word, size_t count)
{
    for (const char *at = text; *at;) {
        size_t length = strcspn(at, " ");
        assert_true(count < WORDS_MOST);
        word[count++] = arena_bytes(a, at, length);
        at += length + (at[length] == ' ');
    }
    return count;
}

/* The same word with a value a tenth higher. */
static const char *grown(struct arena *a, const char *word)
{
    size_t name = strcspn(word, "=") + 1;
    const struct fraction *value =
        fraction_multiply(a, fraction_parse(a, word + name), fraction_from_ratio(a, 11, 10));
    return arena_print(a, "%.*s%s", (int)name, word, fraction_print(a, value, 9, ROUND_HALF_EVEN));
}

static const struct fraction *value_of(struct arena *a, const char *formula,
                                       const char *const *word, size_t count)
{
    struct formula_result result;
    struct fault fault = {.set = false};
    if (formula_ask(a, formula, word, count, false, &result, &fault) != OK)
        fail_msg("%s: %s", formula, fault.text);
    return result.value;
}

static void figures_rise_and_fall_with_their_arguments(void **state)
{
    (void)state;
    for (size_t i = 0; i < NELEM(rows); i++) {
        struct arena *a = arena_new();
        const char *word[WORDS_MOST];
        size_t rising = split(a, rows[i].rises, word, 0);
        size_t count = split(a, rows[i].falls, word, rising);
        const struct fraction *before = value_of(a, rows[i].formula, word, count);
        for (size_t k = 0; k < count; k++) {
            const char *kept = word[k];
            word[k] = grown(a, kept);
            int way = fraction_compare(value_of(a, rows[i].formula, word, count), before);
            if (k < rising ? way <= 0 : way >= 0)
                fail_msg("%s does not %s with %s", rows[i].formula, k < rising ? "rise" : "fall",
                         kept);
            word[k] = kept;
        }
        arena_free(a);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(figures_rise_and_fall_with_their_arguments),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
