//! The NetCDF file as a container of variables. Nothing outside this file knows which library
//! takes it apart.

use netcdf_reader::{NcAttrValue, NcAttribute, NcFile, NcFormat, NcOpenOptions, NcType, NcVariable};

use crate::log::number::Marks;

/// The most that one variable may take in memory: 64 million doubles. A damaged or hostile header
/// cannot ask for more.
const READ_LIMIT: usize = 512 << 20;

/// Deflate shrinks to no less than 1/1032, and a byte may become a double of eight.
const GROWTH_LIMIT: usize = 8 * 1032;

/// What a variable holds.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Kind {
    Number,
    Text,
    Other,
}

/// A variable without its values.
#[derive(Debug, Clone)]
pub(super) struct Variable {
    pub name: String,
    /// Name and size of every dimension.
    pub dimensions: Vec<(String, usize)>,
    pub kind: Kind,
    dtype: NcType,
    attributes: Attributes,
}

/// Named texts and numbers.
#[derive(Debug, Clone, Default)]
pub(super) struct Attributes(Vec<(String, Value)>);

#[derive(Debug, Clone)]
enum Value {
    Text(String),
    Numbers(Vec<f64>),
}

impl Attributes {
    fn new(attributes: &[NcAttribute]) -> Self {
        let value = |value: &NcAttrValue| match value {
            NcAttrValue::Chars(text) => Some(Value::Text(text.trim_end_matches('\0').to_string())),
            NcAttrValue::Strings(texts) => Some(Value::Text(texts.join(" "))),
            other => other.as_f64_vec().map(Value::Numbers),
        };
        Self(attributes.iter().filter_map(|a| Some((a.name.clone(), value(&a.value)?))).collect())
    }

    fn get(&self, name: &str) -> Option<&Value> {
        let exact = self.0.iter().find(|(n, _)| n == name);
        exact.or_else(|| self.0.iter().find(|(n, _)| n.eq_ignore_ascii_case(name))).map(|(_, value)| value)
    }

    /// A text attribute; names are matched without case where they do not match exactly.
    pub fn text(&self, name: &str) -> Option<&str> {
        match self.get(name)? {
            Value::Text(text) => Some(text.trim()).filter(|text| !text.is_empty()),
            Value::Numbers(_) => None,
        }
    }

    /// A numeric attribute; digits in a text attribute count too.
    pub fn numbers(&self, name: &str) -> Vec<f64> {
        match self.get(name) {
            Some(Value::Numbers(numbers)) => numbers.clone(),
            Some(Value::Text(text)) => text
                .split(|c: char| c.is_whitespace() || c == ',')
                .filter_map(|word| word.trim_end_matches(['b', 's']).parse().ok())
                .collect(),
            None => Vec::new(),
        }
    }

    /// An attribute as a word for people.
    pub fn word(&self, name: &str) -> Option<String> {
        match self.get(name)? {
            Value::Text(text) => Some(text.trim().to_string()).filter(|text| !text.is_empty()),
            Value::Numbers(numbers) => numbers.first().map(f64::to_string),
        }
    }
}

impl Variable {
    fn new(variable: &NcVariable) -> Self {
        let kind = match variable.dtype {
            NcType::Char | NcType::String => Kind::Text,
            NcType::Byte | NcType::Short | NcType::Int | NcType::Int64 | NcType::Float | NcType::Double => {
                Kind::Number
            }
            NcType::UByte | NcType::UShort | NcType::UInt | NcType::UInt64 => Kind::Number,
            _ => Kind::Other,
        };
        let size = |size: u64| usize::try_from(size).unwrap_or(usize::MAX);
        Self {
            name: variable.name.clone(),
            dimensions: variable.dimensions.iter().map(|d| (d.name.clone(), size(d.size))).collect(),
            kind,
            dtype: variable.dtype.clone(),
            attributes: Attributes::new(&variable.attributes),
        }
    }

    /// The attributes of the variable.
    pub fn attributes(&self) -> &Attributes {
        &self.attributes
    }

    /// What the library writes where no value was written (`NC_FILL_...` of the NetCDF format).
    fn default_fill(&self) -> Option<f64> {
        match self.dtype {
            NcType::Short => Some(-32_767.0),
            NcType::Int => Some(-2_147_483_647.0),
            NcType::Int64 => Some(-9_223_372_036_854_775_806.0),
            NcType::UShort => Some(65_535.0),
            NcType::UInt => Some(4_294_967_295.0),
            NcType::Float | NcType::Double => Some(9.969_209_968_386_869e36),
            // Every pattern of a byte may be a value.
            _ => None,
        }
    }

    fn is_float(&self) -> bool {
        matches!(self.dtype, NcType::Float | NcType::Double)
    }

    /// The signed number `value` as the unsigned one of the same bits, where `_Unsigned` asks for it.
    fn unsigned(&self, value: f64) -> f64 {
        let span = match self.dtype {
            NcType::Byte => 256.0,
            NcType::Short => 65_536.0,
            NcType::Int => 4_294_967_296.0,
            _ => 0.0,
        };
        if value < 0.0 { value + span } else { value }
    }
}

/// An open NetCDF file.
pub(super) struct Container {
    file: NcFile,
    /// The variant of the format, for people.
    pub format: &'static str,
    pub variables: Vec<Variable>,
    pub globals: Attributes,
    /// The most that one variable may take in memory.
    limit: usize,
}

impl Container {
    /// Opens a file that is in memory; the error is a clause for people.
    pub fn open(bytes: &[u8]) -> Result<Self, String> {
        let limit = bytes.len().saturating_mul(GROWTH_LIMIT).min(READ_LIMIT);
        let options =
            NcOpenOptions { max_read_bytes: limit, max_chunk_bytes: limit, ..NcOpenOptions::default() };
        let file = NcFile::from_bytes_with_options(bytes, options).map_err(|e| e.to_string())?;
        let format = match file.format() {
            NcFormat::Classic => "NetCDF classic",
            NcFormat::Offset64 => "NetCDF 64-bit offset",
            NcFormat::Cdf5 => "NetCDF CDF-5",
            NcFormat::Nc4 | NcFormat::Nc4Classic => "NetCDF-4",
        };
        let variables = file.variables().map_err(|e| e.to_string())?.iter().map(Variable::new).collect();
        let globals = Attributes::new(file.global_attributes().map_err(|e| e.to_string())?);
        Ok(Self { file, format, variables, globals, limit })
    }

    /// A variable by its name, exactly or without case.
    pub fn variable(&self, name: &str) -> Option<&Variable> {
        let exact = self.variables.iter().find(|v| v.name == name);
        exact.or_else(|| self.variables.iter().find(|v| v.name.eq_ignore_ascii_case(name)))
    }

    /// Number of values that the header promises, unless it is beyond all reason.
    pub fn length(&self, variable: &Variable) -> Result<usize, String> {
        let mut sizes = variable.dimensions.iter().map(|d| d.1);
        let length = sizes.try_fold(1_usize, usize::checked_mul);
        let fits = |length: &usize| length.checked_mul(8).is_some_and(|bytes| bytes <= self.limit);
        length
            .filter(fits)
            .ok_or_else(|| "the header asks for more values than the file can hold".to_string())
    }

    /// The values in row-major order, unpacked, with missing ones as NaN. `valid_min` and the like
    /// are not applied: a small negative pressure on deck is a value.
    pub fn numbers(&self, variable: &Variable, marks: &Marks) -> Result<Vec<f64>, String> {
        let expected = self.length(variable)?;
        let array = self.file.read_variable_as_f64(&variable.name).map_err(|e| e.to_string())?;
        let mut values: Vec<f64> = array.iter().copied().collect();
        if values.len() != expected {
            return Err(format!("{} values where the header promises {expected}", values.len()));
        }
        let attributes = variable.attributes();
        let unsigned = attributes.text("_Unsigned").is_some_and(|text| text.eq_ignore_ascii_case("true"));
        let sign = |value: f64| if unsigned { variable.unsigned(value) } else { value };
        let mut fills = attributes.numbers("_FillValue");
        if fills.is_empty() {
            fills.extend(variable.default_fill());
        }
        fills.extend(attributes.numbers("missing_value"));
        let float = variable.dtype == NcType::Float;
        fills.iter_mut().for_each(|fill| *fill = if float { f64::from(*fill as f32) } else { sign(*fill) });
        let first = |name: &str| attributes.numbers(name).first().copied();
        let (scale, offset) = (first("scale_factor"), first("add_offset"));
        for value in &mut values {
            *value = sign(*value);
            if fills.contains(value) {
                *value = f64::NAN;
                continue;
            }
            if scale.is_some() || offset.is_some() {
                *value = *value * scale.unwrap_or(1.0) + offset.unwrap_or(0.0);
            }
            // Marks that the file forgot to declare. A packed integer cannot carry them.
            if variable.is_float() && marks.number(*value) {
                *value = f64::NAN;
            }
        }
        Ok(values)
    }

    /// Whole numbers, of numbers or of characters `0` to `9`; none where there is no value. A
    /// character that is no digit gives -1.
    pub fn codes(&self, variable: &Variable) -> Result<Vec<Option<i64>>, String> {
        if variable.kind == Kind::Text {
            let expected = self.length(variable)?;
            let bytes = if variable.dtype == NcType::Char {
                self.file.read_variable_raw_bytes(&variable.name).map_err(|e| e.to_string())?
            } else {
                let texts = self.file.read_variable_as_strings(&variable.name).map_err(|e| e.to_string())?;
                texts.iter().map(|text| text.trim().bytes().next().unwrap_or(b' ')).collect()
            };
            if bytes.len() != expected {
                return Err(format!("{} values where the header promises {expected}", bytes.len()));
            }
            let code = |byte: u8| match byte {
                b'0'..=b'9' => Some(i64::from(byte - b'0')),
                b' ' | 0 => None,
                _ => Some(-1),
            };
            return Ok(bytes.into_iter().map(code).collect());
        }
        let values = self.numbers(variable, &Marks::default())?;
        Ok(values.into_iter().map(|value| value.is_finite().then_some(value as i64)).collect())
    }

    /// Texts, without blanks around them; numbers as they are written.
    pub fn words(&self, variable: &Variable) -> Result<Vec<String>, String> {
        self.length(variable)?;
        match variable.kind {
            Kind::Text => {
                let texts = self.file.read_variable_as_strings(&variable.name).map_err(|e| e.to_string())?;
                Ok(texts.iter().map(|text| text.trim_matches(['\0', ' ']).to_string()).collect())
            }
            Kind::Number => {
                let values = self.numbers(variable, &Marks::default())?;
                Ok(values.iter().map(|v| if v.is_finite() { v.to_string() } else { String::new() }).collect())
            }
            Kind::Other => Err("neither text nor numbers".to_string()),
        }
    }
}
