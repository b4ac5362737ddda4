/* The catalogue of formulas: nitrogen and phosphorus. Kept by hand; how a row is written
 * stands in process.h. */
#include "process/catalogue.h"

#include "base/poison.h"

static const struct formula rows[] = {
    {
        .name = "total-nitrogen",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "tkn", .unit = "mg/L", .at_least = "0"},
                     {.name = "nitrate", .unit = "mg/L", .at_least = "0"},
                     {.name = "nitrite", .unit = "mg/L", .fallback = "0", .at_least = "0"}},
        .arguments = 3,
        .result = "total_nitrogen",
        .unit = "mg/L",
        .equation = "tkn + nitrate + nitrite",
        .source = "ammonia + organic + nitrate nitrogen: Echelon Institute WPI Class II sheet, "
                  "read as excerpt; TKN is ammonia + organic",
        .trap = "TKN holds the ammonia already",
    },
    {
        .name = "organic-nitrogen",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "tkn", .unit = "mg/L", .at_least = "0"},
                     {.name = "ammonia", .unit = "mg/L", .at_least = "0"}},
        .arguments = 2,
        .result = "organic_nitrogen",
        .unit = "mg/L",
        .equation = "tkn - ammonia",
        .requires = "ammonia <= tkn",
        .source = "ammonia + organic + nitrate nitrogen: Echelon Institute WPI Class II sheet, "
                  "read as excerpt; TKN is ammonia + organic",
    },
    {
        .name = "total-inorganic-nitrogen",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "ammonia", .unit = "mg/L", .at_least = "0"},
                     {.name = "nitrate", .unit = "mg/L", .at_least = "0"},
                     {.name = "nitrite", .unit = "mg/L", .fallback = "0", .at_least = "0"}},
        .arguments = 3,
        .result = "inorganic_nitrogen",
        .unit = "mg/L",
        .equation = "ammonia + nitrate + nitrite",
        .source = "definition",
    },
    {
        .name = "unionized-ammonia-percent",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "temperature", .unit = "degC", .at_least = "0", .at_most = "50"},
                     {.name = "ph", .unit = "pH", .at_least = "0", .at_most = "14"}},
        .arguments = 2,
        .result = "unionized",
        .unit = "%",
        .equation = "100 / (1 + 10 ^ (0.09018 + 2729.92 / (temperature + 273.2) - ph))",
        .source = "Emerson et al. 1975, J. Fish. Res. Board Can. 32:2379, with 273.2 as in the "
                  "British Columbia water quality guideline equation quoted in public assessment "
                  "code, read as excerpt; University of Florida FA16 tables 273.15",
        .trap = "fresh water; 273.15 in place of 273.2 reads up to 0.4 percent lower",
    },
    {
        .name = "unionized-ammonia",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "ammonia", .unit = "mg/L", .at_least = "0"},
                     {.name = "temperature", .unit = "degC", .at_least = "0", .at_most = "50"},
                     {.name = "ph", .unit = "pH", .at_least = "0", .at_most = "14"}},
        .arguments = 3,
        .result = "unionized_ammonia",
        .unit = "mg/L",
        .equation = "ammonia / (1 + 10 ^ (0.09018 + 2729.92 / (temperature + 273.2) - ph))",
        .source = "Emerson et al. 1975, J. Fish. Res. Board Can. 32:2379, with 273.2 as in the "
                  "British Columbia water quality guideline equation quoted in public assessment "
                  "code, read as excerpt; University of Florida FA16 tables 273.15",
        .trap = "fresh water; the share swings with pH and temperature",
    },
    {
        .name = "nitrification-alkalinity-demand",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "ammonia_oxidized", .unit = "mg/L", .at_least = "0"}},
        .arguments = 1,
        .result = "alkalinity_used",
        .unit = "mg/L",
        .equation = "ammonia_oxidized * 7.14",
        .source = "7.14 mg CaCO3 per mg N: Simplified wastewater treatment fundamentals p. 21, "
                  "read as excerpt; Metcalf & Eddy, Wastewater Engineering, 5th ed. p. 762, as "
                  "quoted in public source text",
        .trap = "as CaCO3 per mg of nitrogen, not of ammonia",
    },
    {
        .name = "alkalinity-after-nitrification",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "alkalinity", .unit = "mg/L", .at_least = "0"},
                     {.name = "ammonia_oxidized", .unit = "mg/L", .at_least = "0"},
                     {.name = "nitrate_removed", .unit = "mg/L", .fallback = "0", .at_least = "0"}},
        .arguments = 3,
        .result = "alkalinity",
        .unit = "mg/L",
        .equation = "alkalinity - 7.14 * ammonia_oxidized + 3.57 * nitrate_removed",
        .source = "7.14 used and 3.57 returned per mg N; Metcalf & Eddy, Wastewater Engineering, "
                  "5th ed. p. 810, as quoted in public source text",
    },
    {
        .name = "alkalinity-supplement",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "alkalinity", .unit = "mg/L", .at_least = "0"},
                     {.name = "ammonia_oxidized", .unit = "mg/L", .at_least = "0"},
                     {.name = "nitrate_removed", .unit = "mg/L", .fallback = "0", .at_least = "0"},
                     {.name = "residual", .unit = "mg/L", .fallback = "75", .at_least = "0"}},
        .arguments = 4,
        .result = "alkalinity_to_add",
        .unit = "mg/L",
        .equation =
            "max(0, residual + 7.14 * ammonia_oxidized - 3.57 * nitrate_removed - alkalinity)",
        .source = "as alkalinity-after-nitrification; Metcalf & Eddy, Wastewater Engineering, 5th "
                  "ed. p. 810, as quoted in public source text (residual 70 mg/L); Water Online "
                  "mathematics solutions 2016 (residual 75 mg/L), read as excerpt",
        .usual = "50 to 100 mg/L kept as residual, from memory",
    },
    {
        .name = "nitrification-oxygen-demand",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "ammonia_load", .unit = "lb/d", .at_least = "0"}},
        .arguments = 1,
        .result = "oxygen_demand",
        .unit = "lb/d",
        .equation = "ammonia_load * 4.57",
        .source = "4.57 lb O2 per lb N; Metcalf & Eddy, Wastewater Engineering, 5th ed. p. 762, as "
                  "quoted in public source text",
    },
    {
        .name = "denitrification-oxygen-credit",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "nitrate_load", .unit = "lb/d", .at_least = "0"}},
        .arguments = 1,
        .result = "oxygen_credit",
        .unit = "lb/d",
        .equation = "nitrate_load * 2.86",
        .source = "2.86 lb O2 per lb N; Metcalf & Eddy, Wastewater Engineering, 5th ed. p. 810, as "
                  "quoted in public source text",
    },
    {
        .name = "denitrification-alkalinity-return",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "nitrate_removed", .unit = "mg/L", .at_least = "0"}},
        .arguments = 1,
        .result = "alkalinity_returned",
        .unit = "mg/L",
        .equation = "nitrate_removed * 3.57",
        .source = "3.57 mg CaCO3 per mg N, after EPA 1975; Environmental Engineers Handbook, read "
                  "as excerpt; Metcalf & Eddy, Wastewater Engineering, 5th ed. p. 810, as quoted "
                  "in public source text",
    },
    {
        .name = "methanol-demand",
        .subject = "nitrogen and phosphorus",
        .argument =
            {{.name = "nitrate", .unit = "mg/L", .at_least = "0"},
             {.name = "nitrite", .unit = "mg/L", .fallback = "0", .at_least = "0"},
             {.name = "dissolved_oxygen", .unit = "mg/L", .fallback = "0", .at_least = "0"}},
        .arguments = 3,
        .result = "methanol",
        .unit = "mg/L",
        .equation = "2.47 * nitrate + 1.53 * nitrite + 0.87 * dissolved_oxygen",
        .source = "2.47 mg per mg nitrate N, after EPA 1975; Environmental Engineers Handbook, "
                  "read as excerpt; nitrite 1.53 and oxygen 0.87 terms from memory",
    },
    {
        .name = "recycle-nitrate-removal",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "internal_ratio", .unit = "1", .at_least = "0"},
                     {.name = "return_ratio", .unit = "1", .at_least = "0"}},
        .arguments = 2,
        .result = "nitrate_removed",
        .unit = "%",
        .equation = "(internal_ratio + return_ratio) / (1 + internal_ratio + return_ratio) * 100",
        .source = "upper bound for a pre-anoxic zone; Metcalf & Eddy, Wastewater Engineering, 5th "
                  "ed. p. 810, as quoted in public source text (internal ratio = NOx/Ne - 1 - "
                  "return ratio), rearranged",
        .trap = "ratios as decimals, not percent; an upper bound",
    },
    {
        .name = "bod-to-nutrient-ratio",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "bod", .unit = "mg/L", .at_least = "0"},
                     {.name = "nutrient", .unit = "mg/L", .above = "0"}},
        .arguments = 2,
        .result = "ratio",
        .unit = "1",
        .equation = "bod / nutrient",
        .source = "definition (BOD:N, BOD:P); 100:5:1 is common practice",
        .usual = "100:5:1 of BOD, N and P (common practice)",
    },
    {
        .name = "nutrient-needed",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "bod", .unit = "mg/L", .at_least = "0"},
                     {.name = "parts", .unit = "1", .at_least = "0"}},
        .arguments = 2,
        .result = "nutrient",
        .unit = "mg/L",
        .equation = "bod * parts / 100",
        .source = "BOD:N:P of 100:5:1, common practice",
    },
    {
        .name = "aluminum-dose-for-phosphorus",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "phosphorus", .unit = "mg/L", .at_least = "0"},
                     {.name = "mole_ratio", .unit = "1", .fallback = "1.7", .above = "0"}},
        .arguments = 2,
        .result = "aluminum",
        .unit = "mg/L",
        .equation = "phosphorus * mole_ratio * 26.982 / 30.974",
        .source = "mole ratio Al:P 1.4 / 1.7 / 2.3 for 75 / 85 / 95 percent: TU Delft open course "
                  "on urban sewage treatment",
        .trap = "a ratio of moles; by weight it is 0.871 of it",
        .usual = "1.4, 1.7, 2.3 mol/mol for 75, 85, 95 percent (TU Delft course)",
    },
    {
        .name = "alum-dose-for-phosphorus",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "phosphorus", .unit = "mg/L", .at_least = "0"},
                     {.name = "mole_ratio", .unit = "1", .fallback = "1.7", .above = "0"}},
        .arguments = 2,
        .result = "alum",
        .unit = "mg/L",
        .equation = "phosphorus * mole_ratio * 594.4 / (2 * 30.974)",
        .source = "aluminum-dose-for-phosphorus (TU Delft course) carried to alum by formula mass, "
                  "Al2(SO4)3.14H2O 594.4 g/mol",
        .trap = "dry alum with 14 waters; liquid alum holds about half",
    },
    {
        .name = "ferric-chloride-dose-for-phosphorus",
        .subject = "nitrogen and phosphorus",
        .argument = {{.name = "phosphorus", .unit = "mg/L", .at_least = "0"},
                     {.name = "mole_ratio", .unit = "1", .fallback = "1.5", .above = "0"}},
        .arguments = 2,
        .result = "ferric_chloride",
        .unit = "mg/L",
        .equation = "phosphorus * mole_ratio * 162.2 / 30.974",
        .source = "mole ratio x phosphorus x 162.2 / 30.974; Metcalf & Eddy, Wastewater "
                  "Engineering, 5th ed. p. 484, as quoted in public source text",
        .trap = "dry FeCl3; it uses up alkalinity",
    },
};

const struct catalogue_part catalogue_nutrients = {rows, NELEM(rows)};
