# What --out writes, new reads to the same book, and --out writes again.
"$weirbook" new one.book "$fixtures/marrow-bend/plant" >/dev/null
"$weirbook" -b one.book plant --out a
"$weirbook" new two.book a >/dev/null
"$weirbook" -b two.book plant --out b >/dev/null
diff -r a b && echo "the same files"
"$weirbook" -b one.book plant --as csv >1.csv
"$weirbook" -b two.book plant --as csv >2.csv
cut -d, -f1,3- 1.csv >1.cut
cut -d, -f1,3- 2.csv >2.cut
cmp 1.cut 2.cut && echo "the same cells"
"$weirbook" -b one.book plant --apply a
