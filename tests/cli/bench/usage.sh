# Wrong usage is told with what to do.
bench_book
for words in '' 'bood' 'bod more' '--list boc' 'bod --print --list' 'bod --point EFL' '--from x.csv --point EFF' 'bod --as csv' \
    'bod --revise' 'bod --reason because' 'bod --date 2199-01-01' '--print'; do
    "$weirbook" bench $words
    echo "exit status $?"
done
"$weirbook" completion --answer -- bench --pr
"$weirbook" completion --answer -- bench ecoli
