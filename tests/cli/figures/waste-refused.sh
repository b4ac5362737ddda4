. "${common%/*}/figures/wasting.inc"
wasting_book
for words in "" "--srt 5" "--on 2025-03-14" "--srt ten --on 2025-03-14" "--srt 0 --on 2025-03-14" "--srt -5 --on 2025-03-14" \
    "--srt 5 --mlss 2000 --on 2025-03-14" "--srt 5 --on 2025-03-14 --step much" "--srt 5 --on 2025-03-14 --shifts 2 --hours 3" \
    "--srt 5 --on 2025-03-14 --hours 25" "--srt 5 --on 2025-03-14 --days 1000" "--fm 1e18 --on 2025-03-14"; do
    # shellcheck disable=SC2086
    "$weirbook" waste $words
    echo "exit status $?"
done
