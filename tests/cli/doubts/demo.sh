# The demo plant's year: nothing that cannot be right, and the questions are what happened. In March the storm of the 14th to 19th (flow,
# chemicals, blanket, solids, oxygen demand); on 25 April, 10 June, 29 July and 12 December the other heavy rains (flow, return, chlorine).
# By chance, four of some 16000 readings: 10 February, 29 May, 25 June, 2 October.
export WEIRBOOK=demo.book
readings=$fixtures/marrow-bend/readings
"$weirbook" new demo.book "$fixtures/marrow-bend/plant" >/dev/null
"$weirbook" load --by tester "$readings/operations-2025.csv" "$readings/solids-2025.txt" "$readings"/laboratory-2025-q?.csv >/dev/null
"$weirbook" load --by tester --map "$fixtures/marrow-bend/maps/outside-laboratory.csv" "$readings/outside-laboratory-2025.csv" >/dev/null
"$weirbook" load --by tester "$readings/influent-totalizer-2025.csv" >/dev/null
# Before the corrections BOD5 of 7 March has its decimal point slipped.
"$weirbook" doubts --month 2025-03 --as csv | grep ',2025-03-07,'
"$weirbook" load --by tester --revise --reason 'laboratory correction' "$readings/corrections-2025.csv" >/dev/null
for month in 01 02 03 04 05 06 07 08 09 10 11 12; do
    "$weirbook" doubts --month 2025-$month --as csv | tail -n +2 | grep -v record-incomplete | cut -d, -f2-7
done
"$weirbook" doubts --month 2025-03 --as csv | grep -c record-incomplete
