//! A small reader of PDF files (ISO 32000-1) that strangers may have made: just enough to take out what is attached and to
//! tell whether two files show the same.
//!
//! Everything is bounded: objects that are read, bytes that are unpacked, depth, pages, attachments. What lies beyond is
//! an answer, `Err` with a phrase for the user, and never a crash. Objects are read when they are asked for, so that a
//! file of millions of them costs no more than those that matter.

mod attached;
mod content;
mod file;
mod filter;
mod lexer;
mod object;
mod table;

pub(super) use attached::Attached;
pub(super) use attached::attached;
pub(super) use content::Content;
pub(super) use content::content;
pub(super) use file::PdfFile;

/// What was read, or why the file cannot be read: a phrase that goes on after "the PDF is damaged: ".
pub(super) type Read<T> = Result<T, String>;
