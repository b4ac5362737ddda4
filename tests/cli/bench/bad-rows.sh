# Rows that cannot be used, each with its reason; what is whole is entered.
bench_book
cat >bad.csv <<END
sheet,date,time,point,run,argument,value,unit
susspended-solids,2025-03-12,08:00,EFF,1,filter,0.1123,g
residual,2025-03-12,08:00,EFF,1,titrant,1.2,mL
residual,2025-13-12,08:00,EFF,1,titrant_volume,1.2,mL
residual,2025-03-12,8 am,EFF,1,titrant_volume,1.2,mL
residual,2025-03-12,08:00,EFL,1,titrant_volume,1.2,mL
residual,2199-03-12,08:00,EFF,1,titrant_volume,1.2,mL
residual,2024-03-12,08:00,EFF,1,titrant_volume,1.2,mL
residual,2025-03-13,08:00,EFF,1,titrant_volume,1O.2,mL
residual,2025-03-14,08:00,EFF,1,titrant_volume,1.2,kg
round,2025-03-12,08:00,EFF,,PHH,7.1,
round,2025-03-12,08:00,EFF,,PH,7.1,
total-solids,2025-03-12,08:00,DIG,1,dish,20,g
total-solids,2025-03-12,08:00,DIG,1,wet,19,g
total-solids,2025-03-12,08:00,DIG,1,dry,21,g
bod,2025-03-12,,,blank,initial_do,8.9,
bod,2025-03-12,,,blank,final_do,8.8,
END
"$weirbook" bench --from bad.csv --by tester
echo "exit status $?"
"$weirbook" bench round --from bad.csv
echo "exit status $?"
sqlite3 small.book 'SELECT reason, count(*) FROM rows_set_aside GROUP BY reason'
"$weirbook" check | head -n 1
