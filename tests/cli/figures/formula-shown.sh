"$weirbook" formula solids-retention-time
