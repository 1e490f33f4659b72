//! What a record looks like, for programs that read it: JSON Schema, draft 2020-12.

use serde_json::Value;

use crate::archive::record::Record;

/// The schema of records of format 1. It allows keys that it does not name.
pub fn schema() -> Value {
    schemars::schema_for!(Record).to_value()
}
