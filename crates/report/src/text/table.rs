//! Columns and wrapped words.

/// Side to which a column's entries are moved.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Align {
    Left,
    Right,
}

/// A table with a header row.
pub(crate) struct Table {
    header: Vec<(String, Align)>,
    rows: Vec<Row>,
}

enum Row {
    Cells(Vec<String>),
    Rule(String),
}

impl Table {
    pub(crate) fn new(header: &[(&str, Align)]) -> Self {
        let header = header
            .iter()
            .map(|(name, align)| ((*name).to_owned(), *align))
            .collect();
        Self {
            header,
            rows: Vec::new(),
        }
    }

    pub(crate) fn row(&mut self, cells: Vec<String>) {
        self.rows.push(Row::Cells(cells));
    }

    /// A line across the table with words in it.
    pub(crate) fn rule(&mut self, words: &str) {
        self.rows.push(Row::Rule(words.to_owned()));
    }

    /// The table with two spaces between columns; rows are cut at `columns`.
    pub(crate) fn render(&self, columns: usize) -> String {
        let widths: Vec<usize> = (0..self.header.len())
            .map(|column| {
                let cells = self.rows.iter().filter_map(|row| match row {
                    Row::Cells(cells) => cells.get(column),
                    Row::Rule(_) => None,
                });
                cells
                    .map(|cell| length(cell))
                    .fold(length(&self.header[column].0), usize::max)
            })
            .collect();
        let header: Vec<String> = self.header.iter().map(|(name, _)| name.clone()).collect();
        let mut text = self.line(&header, &widths, columns);
        for row in &self.rows {
            match row {
                Row::Cells(cells) => text.push_str(&self.line(cells, &widths, columns)),
                Row::Rule(words) => {
                    text.push_str(&cut(words, columns));
                    text.push('\n');
                }
            }
        }
        text
    }

    fn line(&self, cells: &[String], widths: &[usize], columns: usize) -> String {
        let mut line = String::new();
        for (index, cell) in cells.iter().enumerate() {
            if index > 0 {
                line.push_str("  ");
            }
            let fill = " ".repeat(widths[index].saturating_sub(length(cell)));
            if self.header[index].1 == Align::Right {
                line.push_str(&fill);
                line.push_str(cell);
            } else {
                line.push_str(cell);
                line.push_str(&fill);
            }
        }
        let mut line = cut(line.trim_end(), columns);
        line.push('\n');
        line
    }
}

/// Number of characters; every one that this crate writes is one column wide.
pub(crate) fn length(text: &str) -> usize {
    text.chars().count()
}

fn cut(text: &str, columns: usize) -> String {
    if length(text) <= columns {
        return text.to_owned();
    }
    let mut short: String = text.chars().take(columns.saturating_sub(3)).collect();
    short.push_str("...");
    short
}

/// Words in lines of at most so many columns, later lines indented; ends with a line feed.
pub(crate) fn wrap(text: &str, columns: usize, indent: &str) -> String {
    let mut lines: Vec<String> = vec![String::new()];
    for word in text.split_whitespace() {
        let Some(line) = lines.last_mut() else {
            continue;
        };
        let space = usize::from(!line.trim().is_empty());
        if !line.trim().is_empty() && length(line) + space + length(word) > columns {
            lines.push(format!(
                "{indent}{}",
                cut(word, columns.saturating_sub(length(indent)))
            ));
        } else {
            if space > 0 {
                line.push(' ');
            }
            let room = columns.saturating_sub(length(line));
            line.push_str(&cut(word, room));
        }
    }
    let mut text = lines.join("\n");
    text.push('\n');
    text
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn words_stay_within_the_columns() {
        let text = wrap(
            "one two three four fiiiiiiiiiiiiiiiiiiiiiiiiive six",
            12,
            "  ",
        );
        assert!(text.lines().all(|line| length(line) <= 12), "{text}");
        assert_eq!(wrap("a b", 80, ""), "a b\n");
    }

    #[test]
    fn columns_line_up() {
        let mut table = Table::new(&[("line", Align::Left), ("eV", Align::Right)]);
        table.row(vec!["5a₁".into(), "-1.5".into()]);
        assert_eq!(table.render(80), "line    eV\n5a₁   -1.5\n");
    }
}
