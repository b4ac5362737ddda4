small_book
sed -i 's/monthly-average,max,30/monthly-average,max,25/' plant/limits.csv
"$weirbook" plant --apply plant --by tester --reason 'final limits'
"$weirbook" plant --out out >/dev/null
grep monthly-average out/limits.csv
sed -i '/^INF/d' plant/points.csv
"$weirbook" plant --apply plant
echo "exit status $?"
