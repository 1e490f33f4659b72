//! The only room that touches the disk.
//!
//! Owns: reading whole files, testing a target before the work, and writing a group of files whole or not at all. Takes
//! paths and bytes; gives bytes or a finding in the user's words. Knows nothing of what is in the files.

mod group;
mod read;
mod write;

pub use read::name_beside;
pub use read::neighbours;
pub use read::read;
pub use read::read_up_to;
pub use read::same;
pub use read::shown;
pub use read::sibling;
pub use write::Existing;
pub use write::Refused;
pub use write::Target;
pub use write::WriteFault;
