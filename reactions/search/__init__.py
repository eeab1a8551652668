"""One query language over reactions; two engines for structures."""
