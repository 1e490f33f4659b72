//! JSON as a person reads it: what fits stays on one line, everything else has a line for each of its parts.

use serde_json::Value;

/// Longest line that holds a whole list or table.
const LINE: usize = 120;
/// Two more for every level.
const INDENT: &str = "  ";

/// The value as text, one line end at the end.
pub fn laid_out(value: &Value) -> String {
    let mut text = String::new();
    write(value, (0, 0), &mut text);
    text.push('\n');
    text
}

/// Writes a value at a depth, behind a key of so many characters.
fn write(value: &Value, (depth, before): (usize, usize), text: &mut String) {
    let room = LINE.saturating_sub(depth * INDENT.len() + before);
    match value {
        Value::Array(list) if !list.is_empty() => {
            if let Some(line) = on_one_line(value, room) {
                return text.push_str(&line);
            }
            let items = list.iter().map(|item| (String::new(), item));
            broken(('[', ']'), items, depth, text);
        }
        Value::Object(fields) if !fields.is_empty() => {
            if depth > 0
                && let Some(line) = on_one_line(value, room)
            {
                return text.push_str(&line);
            }
            let items = fields.iter().map(|(key, item)| (format!("{}: ", Value::from(key.as_str())), item));
            broken(('{', '}'), items, depth, text);
        }
        plain => text.push_str(&plain.to_string()),
    }
}

fn broken<'a>(
    (open, close): (char, char),
    items: impl Iterator<Item = (String, &'a Value)>,
    depth: usize,
    text: &mut String,
) {
    text.push(open);
    for (index, (key, item)) in items.enumerate() {
        text.push_str(if index == 0 { "\n" } else { ",\n" });
        text.push_str(&INDENT.repeat(depth + 1));
        text.push_str(&key);
        write(item, (depth + 1, key.chars().count()), text);
    }
    text.push('\n');
    text.push_str(&INDENT.repeat(depth));
    text.push(close);
}

/// The value in one line of at most `room` characters, if it fits.
fn on_one_line(value: &Value, room: usize) -> Option<String> {
    let parts: Option<Vec<String>> = match value {
        Value::Array(list) if list.len() <= room => list.iter().map(|item| on_one_line(item, room)).collect(),
        Value::Object(fields) if fields.len() <= room => {
            let field = |(key, item): (&String, &Value)| {
                on_one_line(item, room).map(|item| format!("{}: {item}", Value::from(key.as_str())))
            };
            fields.iter().map(field).collect()
        }
        Value::Array(_) | Value::Object(_) => None,
        plain => Some(vec![plain.to_string()]),
    };
    let inside = parts?.join(", ");
    let line = match value {
        Value::Array(_) => format!("[{inside}]"),
        Value::Object(_) => format!("{{{inside}}}"),
        _ => inside,
    };
    (line.chars().count() <= room).then_some(line)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn short_lists_stay_on_one_line_and_long_ones_do_not() {
        let value = serde_json::json!({"short": [1, "a\n", null], "long": vec!["0123456789"; 12], "none": [], "at": {"x": 0.5}});
        let text = laid_out(&value);
        assert!(
            text.starts_with("{\n  \"short\": [1, \"a\\n\", null],\n  \"long\": [\n    \"0123456789\",\n"),
            "{text}"
        );
        assert!(text.ends_with("  \"none\": [],\n  \"at\": {\"x\": 0.5}\n}\n"), "{text}");
        assert_eq!(serde_json::from_str::<Value>(&text).unwrap(), value);
        assert!(text.lines().all(|line| line.chars().count() <= LINE));
    }
}
