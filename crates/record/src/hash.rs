//! A small stable hash for comparing results between machines: FNV-1a, 64 bits (Fowler, Noll,
//! Vo 1991). It detects differences; it is no protection against an adversary.

/// The 64-bit FNV-1a hash of `bytes`.
///
/// ```
/// assert_eq!(hullward_record::hash::fnv1a(b"foobar"), 0x8594_4171_f739_67e8);
/// ```
#[must_use]
pub fn fnv1a(bytes: &[u8]) -> u64 {
    bytes.iter().fold(0xcbf2_9ce4_8422_2325, |hash, &byte| {
        (hash ^ u64::from(byte)).wrapping_mul(0x0000_0100_0000_01b3)
    })
}

/// The hash as sixteen hexadecimal digits.
#[must_use]
pub fn hex(bytes: &[u8]) -> String {
    format!("{:016x}", fnv1a(bytes))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Test vectors of the authors: <http://www.isthe.com/chongo/tech/comp/fnv/>.
    #[test]
    fn agrees_with_the_published_vectors() {
        assert_eq!(fnv1a(b""), 0xcbf2_9ce4_8422_2325);
        assert_eq!(fnv1a(b"a"), 0xaf63_dc4c_8601_ec8c);
        assert_eq!(hex(b"foobar"), "85944171f73967e8");
    }
}
