# One BOD5 sample a week is asked for; weeks start on Sunday. The week of 2025-03-04 has one, that of the 9th has none.
small_plant
printf 'date,point,parameter,value,unit\n2025-03-04,EFF,BOD5,20.0,mg/L\n2025-03-18,EFF,BOD5,<2,mg/L\n' >march.csv
"$weirbook" new small.book plant >/dev/null
"$weirbook" load --by tester march.csv >/dev/null
"$weirbook" due --on 2025-03-12
echo "exit status $?"
"$weirbook" due --on 2025-03-19
echo "exit status $?"
"$weirbook" due --on 2025-03-19 --days 14 --as csv
"$weirbook" due --on 2025-03-19 --days 1 --as json
"$weirbook" due --on 2025-03-19 --days 0
echo "exit status $?"
sed -i 's|,1/week||' plant/limits.csv
sed -i 's|unit,samples|unit|' plant/limits.csv
sed -i 's|mg/L,$|mg/L|; s|%,$|%|' plant/limits.csv
"$weirbook" new unasked.book plant >/dev/null
"$weirbook" -b unasked.book due --on 2025-03-19
echo "exit status $?"
