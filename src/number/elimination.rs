//! Dense matrices and Gauss–Jordan elimination over any [`Scalar`], skipping zeros.

use std::ops::Index;
use std::ops::IndexMut;

use crate::number::Scalar;

/// A dense matrix, row by row.
#[derive(Clone, Debug, PartialEq)]
pub struct Matrix<S> {
    rows: usize,
    columns: usize,
    entries: Vec<S>,
}

impl<S: Scalar> Matrix<S> {
    /// All zeros.
    pub fn zero(rows: usize, columns: usize) -> Self {
        Self { rows, columns, entries: vec![S::zero(); rows * columns] }
    }

    /// Number of rows.
    pub fn rows(&self) -> usize {
        self.rows
    }

    /// Number of columns.
    pub fn columns(&self) -> usize {
        self.columns
    }

    /// One row.
    pub fn row(&self, row: usize) -> &[S] {
        &self.entries[row * self.columns..(row + 1) * self.columns]
    }

    /// Rows and columns exchanged.
    pub fn transposed(&self) -> Self {
        let mut turned = Self::zero(self.columns, self.rows);
        for row in 0..self.rows {
            for column in 0..self.columns {
                turned[(column, row)] = self[(row, column)].clone();
            }
        }
        turned
    }

    fn swap_rows(&mut self, a: usize, b: usize) {
        for column in 0..self.columns {
            self.entries.swap(a * self.columns + column, b * self.columns + column);
        }
    }

    fn scale_row(&mut self, row: usize, pivot: &S) {
        for entry in &mut self.entries[row * self.columns..(row + 1) * self.columns] {
            if *entry != S::zero() {
                *entry = entry.clone() / pivot.clone();
            }
        }
    }

    fn subtract_row(&mut self, from: usize, row: usize, factor: &S) {
        for column in 0..self.columns {
            let step = &self.entries[row * self.columns + column];
            if *step != S::zero() {
                let change = step.clone() * factor.clone();
                let at = from * self.columns + column;
                self.entries[at] = self.entries[at].clone() - change;
            }
        }
    }
}

impl<S> Index<(usize, usize)> for Matrix<S> {
    type Output = S;
    fn index(&self, (row, column): (usize, usize)) -> &S {
        &self.entries[row * self.columns + column]
    }
}

impl<S> IndexMut<(usize, usize)> for Matrix<S> {
    fn index_mut(&mut self, (row, column): (usize, usize)) -> &mut S {
        &mut self.entries[row * self.columns + column]
    }
}

/// The matrix has no inverse.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Singular;

/// X in A X = B.
///
/// `a` is n × n, `b` is n × m; the answer is n × m. Errors when `a` is singular.
pub fn solve<S: Scalar>(mut a: Matrix<S>, mut b: Matrix<S>) -> Result<Matrix<S>, Singular> {
    for column in 0..a.rows {
        let pivot_row = best_pivot(&a, column).ok_or(Singular)?;
        a.swap_rows(column, pivot_row);
        b.swap_rows(column, pivot_row);
        let pivot = a[(column, column)].clone();
        a.scale_row(column, &pivot);
        b.scale_row(column, &pivot);
        eliminate(&mut a, &mut b, column);
    }
    Ok(b)
}

fn eliminate<S: Scalar>(a: &mut Matrix<S>, b: &mut Matrix<S>, column: usize) {
    for row in 0..a.rows {
        let factor = a[(row, column)].clone();
        if row != column && factor != S::zero() {
            a.subtract_row(row, column, &factor);
            b.subtract_row(row, column, &factor);
        }
    }
}

fn best_pivot<S: Scalar>(a: &Matrix<S>, column: usize) -> Option<usize> {
    let worth = |row: usize| a[(row, column)].pivot_worth();
    let best = (column..a.rows).reduce(|best, row| if worth(row) > worth(best) { row } else { best })?;
    (worth(best) > 0.0).then_some(best)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::number::Rational;

    #[test]
    fn a_small_system_is_solved_exactly() {
        // Cramer's rule by hand: x + 2y = 5, 3x + 4y = 6 gives x = −4, y = 9/2.
        let mut a = Matrix::zero(2, 2);
        let mut b = Matrix::zero(2, 1);
        for (at, value) in [((0, 0), 1), ((0, 1), 2), ((1, 0), 3), ((1, 1), 4)] {
            a[at] = Rational::from(value);
        }
        (b[(0, 0)], b[(1, 0)]) = (Rational::from(5), Rational::from(6));
        let x = solve(a, b).unwrap();
        assert_eq!((x[(0, 0)].to_string(), x[(1, 0)].to_string()), ("-4".into(), "9/2".into()));
    }

    #[test]
    fn a_singular_matrix_is_an_error() {
        assert_eq!(solve(Matrix::<f64>::zero(2, 2), Matrix::zero(2, 1)), Err(Singular));
    }
}
