# The answers of a whole sheet from a pipe.
bench_book
tidy() { sed "s/20[0-9][0-9]-[0-9-]* [0-9:]*$/{now}/; s/\[20[0-9-]*\]/[{today}]/; s/20[0-9-]* [0-9][0-9]:[0-9][0-9]:2/{now}:2/; s/sheet of [0-9-]* [0-9:]*/sheet of {now}/"; }
printf '%s\n' 2025-03-12 '?' EFX eff 25:00 08:00 lab '' 8.9 5.3 -60 undo 5.4 60 '' '' 8.9 | "$weirbook" bench bod --by tester | tidy
ls
printf '%s\n' look 'go on' 1.9 120 '' '' done yes | "$weirbook" bench bod --by tester | tidy
ls
