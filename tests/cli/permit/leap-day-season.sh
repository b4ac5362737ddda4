# R36 of weirbook-rules(7): a season that ends on 02-28 takes in 02-29, one that begins on 02-29 begins on 03-01 in other years.
small_plant
sed -i '/since/d' plant/plant.csv
cat >plant/limits.csv <<END
outfall,point,parameter,basis,statistic,bound,limit,unit,season
001,EFF,TSS,concentration,daily,max,20,mg/L,11-01..02-28
001,EFF,TSS,concentration,daily,max,30,mg/L,03-01..10-31
001,EFF,BOD5,concentration,daily,max,20,mg/L,02-29..03-10
END
cat >readings.csv <<END
date,point,parameter,value,unit
2023-02-28,EFF,TSS,21,mg/L
2023-03-01,EFF,TSS,22,mg/L
2023-02-28,EFF,BOD5,21,mg/L
2023-03-01,EFF,BOD5,22,mg/L
2024-02-28,EFF,TSS,21,mg/L
2024-02-29,EFF,TSS,25,mg/L
2024-02-29,EFF,BOD5,23,mg/L
2024-03-01,EFF,BOD5,24,mg/L
END
"$weirbook" new small.book plant >/dev/null
"$weirbook" load --by tester readings.csv >/dev/null
for month in 2023-02 2023-03 2024-02 2024-03; do
    "$weirbook" permit --month $month --as csv | tail -n +2
done
echo "a day that does not exist, and two seasons that share 02-29:"
cat >plant/limits.csv <<END
outfall,point,parameter,basis,statistic,bound,limit,unit,season
001,EFF,NH3N,concentration,daily,max,20,mg/L,02-30..10-31
001,EFF,TSS,concentration,daily,max,20,mg/L,11-01..02-28
001,EFF,TSS,concentration,daily,max,30,mg/L,02-29..10-31
END
"$weirbook" new other.book plant
