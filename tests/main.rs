//! Every test of the service, in one binary. Folders mirror `src`; `published` holds the checks against outside sources.

mod calc;
mod published;
