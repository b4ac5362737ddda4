# Every sheet from a file of its own; the figures are tested beside the sheets, here the words.
bench_book
for sheet in suspended-solids total-solids settleability settleable-solids spin bod cbod fecal-membrane ecoli-membrane \
    enterococci-membrane ecoli-tubes fecal-tubes coliform-tubes enterococci-tubes residual ph-calibration do-calibration round; do
    cp "$sheets/$sheet.csv" .
    echo "== $sheet"
    "$weirbook" bench "$sheet" --from "$sheet.csv" --by tester
    echo "exit status $?"
done
"$weirbook" check | head -n 1
