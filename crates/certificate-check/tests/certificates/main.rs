//! Certificates that must be accepted, and altered ones that must be refused for the right reason.
//!
//! | module | what it holds |
//! |---|---|
//! | `made` | certificates, made as `railwright shortlist --certificate` does |
//! | `accepts` | sample sheets and random shops |
//! | `refuses` | each kind of claim, altered |
//! | `size` | how much code a reader has to trust |

mod accepts;
mod made;
mod refuses;
mod size;
