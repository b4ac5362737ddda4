# The same book and the same printed date give the same bytes, whatever the zone, the locale and the hour.
small_book
"$weirbook" report --month 2025-03 --out one --printed 2025-04-10
TZ=Pacific/Auckland LC_ALL=C "$weirbook" report --month 2025-03 --out two --printed 2025-04-10 >/dev/null
cmp one/permit-2025-03.txt two/permit-2025-03.txt && echo "the same text"
cmp one/permit-2025-03.xlsx two/permit-2025-03.xlsx && echo "the same workbook"
ls one
cat one/permit-2025-03.txt
