small_plant
sed -i 's/^outfall,point/outfall,piont/' plant/limits.csv
"$weirbook" new small.book plant
