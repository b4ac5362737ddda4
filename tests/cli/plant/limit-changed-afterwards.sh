# A limit and a rule changed after a month was reported: said, with the way out; with dates nothing changes back then.
small_book
mkdir new
cp plant/* new
sed -i 's/max,30,mg/max,25,mg/' new/limits.csv
printf 'week_starts,monday\n' >>new/plant.csv
"$weirbook" plant --apply new --reason 'new permit'
cp plant/* new
sed -i '1s/$/,to,from/; 2,$s/$/,,/' new/limits.csv
sed -i '2s/,,$/,2025-03-31,/' new/limits.csv
echo '001,EFF,BOD5,concentration,monthly-average,max,25,mg/L,1/week,,2025-04-01' >>new/limits.csv
"$weirbook" plant --apply plant --reason 'as it was'
echo 'dated:'
"$weirbook" plant --apply new --reason 'new permit, dated'
