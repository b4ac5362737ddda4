. "${common%/*}/figures/wasting.inc"
wasting_book
echo "== for an SRT, over three shifts"
"$weirbook" waste --srt 12.5 --on 2025-03-14 --days 3 --shifts 3
echo "== for an F:M, eight hours"
"$weirbook" waste --fm 0.25 --on 2025-03-14 --hours 8 --days 1
echo "== as csv and json"
"$weirbook" waste --mlss 1900 --on 2025-03-14 --as csv
"$weirbook" waste --srt 12.5 --on 2025-03-14 --days 2 --as csv
"$weirbook" waste --srt 12.5 --on 2025-03-14 --as json
