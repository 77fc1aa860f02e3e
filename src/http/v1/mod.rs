//! Version 1 of the resources: one file each, with handler, request, response and conversions.
