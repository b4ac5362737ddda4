"$weirbook" load --help
