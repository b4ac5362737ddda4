# An interim and a final limit that share a day, seasons that do, and dates that end before they begin: refused by line.
small_plant
cat >plant/limits.csv <<END
outfall,point,parameter,basis,statistic,bound,limit,unit,season,from,to
001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,,,2025-06-30
001,EFF,BOD5,concentration,monthly-average,max,25,mg/L,,2025-06-30,
001,EFF,TSS,concentration,monthly-average,max,30,mg/L,11-01..05-01,,
001,EFF,TSS,concentration,monthly-average,max,20,mg/L,05-01..10-31,,
001,EFF,NH3N,concentration,monthly-average,max,4,mg/L,,2025-07-01,2025-06-30
END
"$weirbook" new small.book plant
