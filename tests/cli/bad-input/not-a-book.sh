small_plant
echo 'date,point' >file.csv
: >empty.book
remember file.csv
"$weirbook" -b file.csv permit --month 2025-03
echo "exit status $?"
"$weirbook" -b empty.book permit --month 2025-03
echo "exit status $?"
"$weirbook" -b plant permit --month 2025-03
echo "exit status $?"
"$weirbook" -b nowhere.book permit --month 2025-03
echo "exit status $?"
unchanged
