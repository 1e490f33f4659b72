//! Dense matrices over any [`Scalar`].

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
