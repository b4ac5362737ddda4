# Every blank sheet fits a page of 100 columns and 66 lines.
bench_book
"$weirbook" bench --from "$sheets/round.csv" --by tester >/dev/null
"$weirbook" bench bod --print
"$weirbook" bench round --print --date 2025-03-13
for sheet in suspended-solids total-solids settleability settleable-solids spin bod cbod fecal-membrane ecoli-membrane \
    enterococci-membrane ecoli-tubes fecal-tubes coliform-tubes enterococci-tubes residual ph-calibration do-calibration round; do
    "$weirbook" bench "$sheet" --print >sheet.txt
    awk -v sheet="$sheet" 'length > 100 || NR > 66 { print sheet ": line " NR ": " $0 }' sheet.txt
done
