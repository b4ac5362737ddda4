# One book that is none, one that is not there, one exceeded, one clear: each is told, the rest go on.
small_book
mv small.book clear.book
sed 's/Small Works/Other Works/' plant/plant.csv >plant/p && mv plant/p plant/plant.csv
"$weirbook" new beyond.book plant >/dev/null
printf 'date,point,parameter,value,unit\n2025-03-04,EFF,BOD5,61,mg/L\n' >high.csv
"$weirbook" load -b beyond.book high.csv >/dev/null
echo nothing >junk.book
"$weirbook" permit -b clear.book -b junk.book -b beyond.book -b absent.book --month 2025-03
echo "exit $?"
"$weirbook" permit -b beyond.book --month 2025-03 --as csv | sed 's/^/beyond.book,/; 1s/^beyond.book/book/' >expected.csv
"$weirbook" permit -b clear.book --month 2025-03 --as csv | sed '1d; s/^/clear.book,/' >>expected.csv
"$weirbook" permit -b beyond.book -b clear.book --month 2025-03 --as csv | cmp - expected.csv && echo "rows as one by one"
"$weirbook" permit -b beyond.book -b clear.book --month 2025-03 --as json |
    python3 -c 'import json, sys; print([row["book"] for row in json.load(sys.stdin)])'
"$weirbook" permit -b clear.book -b beyond.book --month 2025-03 --to 2025-04
echo "exit $?"
"$weirbook" day -b clear.book -b beyond.book 2025-03-04
echo "exit $?"
