# A share of like in like takes readings of any one kind: (20 - 0.5) / 20 = 97.5 %, worked by hand; mixed kinds are refused.
small_plant
cat >plant/process.csv <<END
name,at,parameter,formula,argument,source,unit
settled-out,INF>EFF,SETTLEABLE,percent-removal,influent,INF SETTLEABLE,
settled-out,INF>EFF,SETTLEABLE,percent-removal,effluent,EFF SETTLEABLE,
END
printf 'date,point,parameter,value,unit\n2025-03-04,INF,SETTLEABLE,20,mL/L\n2025-03-04,EFF,SETTLEABLE,0.5,mL/L\n' >cone.csv
"$weirbook" new small.book plant >/dev/null
"$weirbook" load --by tester cone.csv >/dev/null
"$weirbook" process --from 2025-03-04 --to 2025-03-04 --as csv
sed -i 's/EFF SETTLEABLE/EFF TSS/' plant/process.csv
"$weirbook" new mixed.book plant
