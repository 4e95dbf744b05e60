//! The classic NetCDF encoding with 64-bit offsets: a header, then the values of one variable after the other.
//!
//! Source: OGC 10-092r3, NetCDF Classic and 64-bit Offset Format. Only what a table of samples needs is here: dimensions of
//! fixed length, no records. Values are taken from iterators as they are written, so that a long log is never held twice.

use std::io::{self, Write};

/// Stands for a missing double: the default fill value of the NetCDF library (`NC_FILL_DOUBLE`). Readers mask it only where
/// a variable declares it as its `_FillValue`.
pub(super) const FILL_DOUBLE: f64 = 9.969_209_968_386_869e36;
/// The default fill of bytes (`NC_FILL_BYTE`, -127), for the gap behind a variable.
const FILL_BYTE: u8 = 0x81;

const TAG_DIMENSION: u32 = 10;
const TAG_VARIABLE: u32 = 11;
const TAG_ATTRIBUTE: u32 = 12;
/// Largest variable in bytes that the header can state.
const LARGEST: u64 = u32::MAX as u64 - 3;
/// Values are handed on in pieces of about this many bytes.
const PIECE: usize = 1 << 16;

/// Value of an attribute.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Value {
    /// Text, UTF-8.
    Text(String),
    /// Bytes.
    Bytes(Vec<i8>),
    /// One double.
    Double(f64),
}

impl From<&str> for Value {
    fn from(text: &str) -> Self {
        Value::Text(text.to_string())
    }
}

impl From<String> for Value {
    fn from(text: String) -> Self {
        Value::Text(text)
    }
}

impl From<f64> for Value {
    fn from(value: f64) -> Self {
        Value::Double(value)
    }
}

impl From<&[i8]> for Value {
    fn from(values: &[i8]) -> Self {
        Value::Bytes(values.to_vec())
    }
}

/// Attributes in their order.
#[derive(Debug, Clone, PartialEq, Default)]
pub(super) struct Attributes(Vec<(&'static str, Value)>);

impl Attributes {
    /// The same with one more; an empty text says nothing and is left out.
    #[must_use]
    pub fn with(mut self, name: &'static str, value: impl Into<Value>) -> Self {
        let value = value.into();
        if !matches!(&value, Value::Text(text) if text.is_empty()) {
            self.0.push((name, value));
        }
        self
    }
}

/// A dimension of an [`Encoding`].
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct Dimension(usize);

/// The values of a variable, as many as its dimension is long.
pub(super) enum Data<'a> {
    /// Characters.
    Text(String),
    /// Bytes.
    Bytes(Box<dyn Iterator<Item = i8> + 'a>),
    /// Doubles; what is not finite is written as [`FILL_DOUBLE`].
    Doubles(Box<dyn Iterator<Item = f64> + 'a>),
}

impl Data<'_> {
    /// Code of the type in the header.
    fn code(&self) -> u32 {
        match self {
            Data::Bytes(_) => 1,
            Data::Text(_) => 2,
            Data::Doubles(_) => 6,
        }
    }

    /// Bytes of one value.
    fn width(&self) -> u64 {
        if matches!(self, Data::Doubles(_)) { 8 } else { 1 }
    }
}

/// A variable of an [`Encoding`].
pub(super) struct Variable<'a> {
    /// Its name.
    pub name: &'static str,
    /// Its dimension; none for a single value.
    pub dimension: Option<Dimension>,
    /// Its attributes.
    pub attributes: Attributes,
    /// Its values.
    pub data: Data<'a>,
}

/// A file that is about to be written.
#[derive(Default)]
pub(super) struct Encoding<'a> {
    dimensions: Vec<(&'static str, usize)>,
    attributes: Attributes,
    variables: Vec<Variable<'a>>,
}

impl<'a> Encoding<'a> {
    /// A file with these global attributes.
    pub fn new(attributes: Attributes) -> Self {
        Self { attributes, ..Self::default() }
    }

    /// Adds a dimension; its length must not be zero, which the format keeps for records.
    pub fn dimension(&mut self, name: &'static str, length: usize) -> Dimension {
        self.dimensions.push((name, length));
        Dimension(self.dimensions.len() - 1)
    }

    /// Adds a variable. Names are the caller's to keep apart.
    pub fn variable(&mut self, variable: Variable<'a>) {
        self.variables.push(variable);
    }

    /// Writes the file.
    ///
    /// # Errors
    /// Those of the writer; `InvalidInput` when a dimension is empty, a variable is too large for the format (4 GiB) or has
    /// more or fewer values than its dimension.
    pub fn write(self, out: &mut dyn Write) -> io::Result<()> {
        let header = self.header()?;
        out.write_all(&header)?;
        for variable in self.variables {
            let length = variable.dimension.map_or(1, |d| self.dimensions[d.0].1);
            let written = write_values(out, variable.data)?;
            if written != length {
                return Err(invalid(format!("{}: {written} values for a length of {length}", variable.name)));
            }
        }
        Ok(())
    }

    /// The header. Where the values of the variables begin depends on its length, which does not depend on where they begin.
    fn header(&self) -> io::Result<Vec<u8>> {
        let begin = self.header_from(0)?.len() as u64;
        self.header_from(begin)
    }

    fn header_from(&self, mut begin: u64) -> io::Result<Vec<u8>> {
        let mut out = b"CDF\x02".to_vec();
        push_u32(&mut out, 0); // no records
        push_list(&mut out, TAG_DIMENSION, self.dimensions.len())?;
        for (name, length) in &self.dimensions {
            if *length == 0 {
                return Err(invalid(format!("the dimension {name} is empty")));
            }
            push_text(&mut out, name)?;
            push_count(&mut out, *length)?;
        }
        push_attributes(&mut out, &self.attributes)?;
        push_list(&mut out, TAG_VARIABLE, self.variables.len())?;
        for variable in &self.variables {
            push_text(&mut out, variable.name)?;
            push_count(&mut out, variable.dimension.iter().len())?;
            if let Some(dimension) = variable.dimension {
                push_count(&mut out, dimension.0)?;
            }
            push_attributes(&mut out, &variable.attributes)?;
            push_u32(&mut out, variable.data.code());
            let length = variable.dimension.map_or(1, |d| self.dimensions[d.0].1) as u64;
            let bytes = (length * variable.data.width()).next_multiple_of(4);
            if bytes > LARGEST {
                return Err(invalid(format!(
                    "{}: {length} values are more than a NetCDF variable holds",
                    variable.name
                )));
            }
            push_u32(&mut out, bytes as u32);
            out.extend_from_slice(&begin.to_be_bytes());
            begin += bytes;
        }
        Ok(out)
    }
}

/// Writes values and the gap behind them; returns their number.
fn write_values(out: &mut dyn Write, data: Data) -> io::Result<usize> {
    let mut piece = Vec::with_capacity(PIECE + 8);
    let mut written = 0;
    let gap = match data {
        Data::Text(text) => {
            out.write_all(text.as_bytes())?;
            written = text.len();
            0
        }
        Data::Bytes(values) => {
            for value in values {
                piece.push(value as u8);
                written += 1;
                if piece.len() >= PIECE {
                    out.write_all(&piece)?;
                    piece.clear();
                }
            }
            FILL_BYTE
        }
        Data::Doubles(values) => {
            for value in values {
                let value = if value.is_finite() { value } else { FILL_DOUBLE };
                piece.extend_from_slice(&value.to_be_bytes());
                written += 8;
                if piece.len() >= PIECE {
                    out.write_all(&piece)?;
                    piece.clear();
                }
            }
            out.write_all(&piece)?;
            return Ok(written / 8);
        }
    };
    piece.resize(piece.len() + written.next_multiple_of(4) - written, gap);
    out.write_all(&piece)?;
    Ok(written)
}

fn push_u32(out: &mut Vec<u8>, value: u32) {
    out.extend_from_slice(&value.to_be_bytes());
}

/// A count. Readers take counts as signed numbers of 32 bits.
fn push_count(out: &mut Vec<u8>, count: usize) -> io::Result<()> {
    let count = i32::try_from(count).map_err(|_| invalid(format!("{count} is more than NetCDF counts")))?;
    push_u32(out, count.unsigned_abs());
    Ok(())
}

/// Head of a list; an empty one has no tag.
fn push_list(out: &mut Vec<u8>, tag: u32, count: usize) -> io::Result<()> {
    push_u32(out, if count == 0 { 0 } else { tag });
    push_count(out, count)
}

/// A text with its length before it and the gap to the next multiple of four behind it.
fn push_text(out: &mut Vec<u8>, text: &str) -> io::Result<()> {
    push_count(out, text.len())?;
    out.extend_from_slice(text.as_bytes());
    out.resize(out.len().next_multiple_of(4), 0);
    Ok(())
}

fn push_attributes(out: &mut Vec<u8>, attributes: &Attributes) -> io::Result<()> {
    push_list(out, TAG_ATTRIBUTE, attributes.0.len())?;
    for (name, value) in &attributes.0 {
        push_text(out, name)?;
        match value {
            Value::Text(text) => {
                push_u32(out, 2);
                push_text(out, text)?;
            }
            Value::Bytes(values) => {
                push_u32(out, 1);
                push_count(out, values.len())?;
                out.extend(values.iter().map(|&value| value as u8));
                out.resize(out.len().next_multiple_of(4), 0);
            }
            Value::Double(value) => {
                push_u32(out, 6);
                push_count(out, 1)?;
                out.extend_from_slice(&value.to_be_bytes());
            }
        }
    }
    Ok(())
}

fn invalid(text: String) -> io::Error {
    io::Error::new(io::ErrorKind::InvalidInput, text)
}

#[cfg(test)]
mod tests {
    use super::*;
    use netcdf_reader::NcFile;

    fn doubles<'a>(name: &'static str, dimension: Option<Dimension>, values: &'a [f64]) -> Variable<'a> {
        let attributes = Attributes::default().with("_FillValue", FILL_DOUBLE);
        Variable { name, dimension, attributes, data: Data::Doubles(Box::new(values.iter().copied())) }
    }

    fn bytes<'a>(name: &'static str, dimension: Option<Dimension>, values: &'a [i8]) -> Variable<'a> {
        let data = Data::Bytes(Box::new(values.iter().copied()));
        Variable { name, dimension, attributes: Attributes::default(), data }
    }

    /// The smallest file with one of each, byte by byte by hand from the grammar of OGC 10-092r3.
    #[test]
    fn every_byte_by_hand() {
        let mut file = Encoding::new(Attributes::default().with("t", "ab"));
        let x = file.dimension("x", 3);
        file.variable(bytes("b", Some(x), &[1, -1, 2]));
        file.variable(Variable { attributes: Attributes::default(), ..doubles("d", None, &[1.0]) });
        let mut out = Vec::new();
        file.write(&mut out).unwrap();
        #[rustfmt::skip]
        let by_hand: &[u8] = &[
            b'C', b'D', b'F', 2,    0, 0, 0, 0, // no records
            0, 0, 0, 10,   0, 0, 0, 1,   0, 0, 0, 1, b'x', 0, 0, 0,   0, 0, 0, 3, // x = 3
            0, 0, 0, 12,   0, 0, 0, 1,   0, 0, 0, 1, b't', 0, 0, 0,   0, 0, 0, 2,   0, 0, 0, 2, b'a', b'b', 0, 0,
            0, 0, 0, 11,   0, 0, 0, 2,
            0, 0, 0, 1, b'b', 0, 0, 0,   0, 0, 0, 1,   0, 0, 0, 0,   0, 0, 0, 0,   0, 0, 0, 0, // b(x), no attributes
            0, 0, 0, 1,   0, 0, 0, 4,   0, 0, 0, 0, 0, 0, 0, 140, // bytes, 4 with the gap, from 140
            0, 0, 0, 1, b'd', 0, 0, 0,   0, 0, 0, 0,   0, 0, 0, 0,   0, 0, 0, 0,
            0, 0, 0, 6,   0, 0, 0, 8,   0, 0, 0, 0, 0, 0, 0, 144,
            1, 255, 2, 0x81,
            0x3f, 0xf0, 0, 0, 0, 0, 0, 0,
        ];
        assert_eq!(out, by_hand);
    }

    #[test]
    fn values_come_back() {
        let long: Vec<f64> = (0..20_001).map(|i| f64::from(i) / 7.0).collect();
        let legs: Vec<i8> = (0..20_001).map(|i| (i % 5) as i8 - 2).collect();
        let mut file = Encoding::new(Attributes::default().with("empty", "").with("k", 2.5));
        let obs = file.dimension("obs", long.len());
        let letters = file.dimension("letters", "Süd 7".len());
        let text = Data::Text("Süd 7".to_string());
        file.variable(Variable {
            name: "s",
            dimension: Some(letters),
            attributes: Attributes::default(),
            data: text,
        });
        file.variable(bytes("legs", Some(obs), &legs));
        file.variable(doubles("long", Some(obs), &long));
        let mut out = Vec::new();
        file.write(&mut out).unwrap();

        let file = NcFile::from_bytes(&out).unwrap();
        assert!(file.global_attribute("empty").is_err());
        assert_eq!(file.global_attribute("k").unwrap().value.as_f64(), Some(2.5));
        assert_eq!(file.read_variable::<f64>("long").unwrap().into_raw_vec_and_offset().0, long);
        assert_eq!(file.read_variable::<i8>("legs").unwrap().into_raw_vec_and_offset().0, legs);
        assert_eq!(file.read_variable_as_string("s").unwrap(), "Süd 7");
    }

    #[test]
    fn what_is_not_finite_is_missing() {
        let mut file = Encoding::default();
        let x = file.dimension("x", 3);
        file.variable(doubles("d", Some(x), &[f64::NAN, 1.0, f64::INFINITY]));
        let mut out = Vec::new();
        file.write(&mut out).unwrap();
        let file = NcFile::from_bytes(&out).unwrap();
        let raw = file.read_variable::<f64>("d").unwrap().into_raw_vec_and_offset().0;
        assert_eq!(raw, [FILL_DOUBLE, 1.0, FILL_DOUBLE]);
        let masked = file.read_variable_unpacked_masked("d").unwrap();
        assert!(masked[[0]].is_nan() && masked[[1]] == 1.0 && masked[[2]].is_nan());
    }

    #[test]
    fn lengths_that_do_not_fit_are_refused() {
        let refused = |length: usize, values: &[f64]| {
            let mut file = Encoding::default();
            let x = file.dimension("x", length);
            file.variable(doubles("d", Some(x), values));
            file.write(&mut io::sink()).unwrap_err().to_string()
        };
        assert!(refused(2, &[1.0]).contains("1 values for a length of 2"));
        assert!(refused(1, &[1.0, 2.0]).contains("2 values for a length of 1"));
        assert!(refused(0, &[]).contains("empty"));
        assert!(refused(600_000_000, &[]).contains("more than a NetCDF variable holds"));
    }
}
