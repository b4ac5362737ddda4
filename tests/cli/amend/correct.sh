# A corrected reading has the new value in force and keeps the old one. Means by hand, <2 counted as 0 and rounded to an even digit: of 20.0, 24, <2
# and 30 it is 18.5, 18; with 14 for 24 16; with 12 15.5, 16; without it 16.67, 17; with <2 12.5, 12.
small_book
mean() { "$weirbook" permit --month 2025-03 --on 2025-04-10 --as csv | grep ',concentration,monthly-average,' | cut -d, -f9-13; }
mean
"$weirbook" amend --date 2025-03-11 --point EFF --parameter BOD5 --value 14 --reason 'digits swapped' --by lab
mean
"$weirbook" export --from 2025-03-11 --to 2025-03-11
"$weirbook" day 2025-03-11 --as csv
# in another unit
"$weirbook" amend --date 2025-03-11 --point EFF --parameter BOD5 --value 12000 --unit ug/L --reason 'as the sheet has it' --by lab
mean
"$weirbook" amend --date 2025-03-11 --point EFF --parameter BOD5 --invalid --reason 'bottle broke' --by lab
mean
"$weirbook" export --from 2025-03-11 --to 2025-03-11
"$weirbook" amend --date 2025-03-11 --point EFF --parameter BOD5 --value '<2' --reason 'it was another bottle' --by lab
mean
"$weirbook" report --month 2025-03 --out . --printed 2025-04-10 >/dev/null
sed -n '/^Corrections$/,/^Rules/p' permit-2025-03.txt | sed "s/$(date -u +%F)/{today}/g"
"$weirbook" check | head -1
