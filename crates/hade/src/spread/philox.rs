//! Random numbers by counting: Philox4x64-10 (Salmon, J.K. et al. (2011) Parallel random numbers: as easy as 1, 2,
//! 3, SC '11). A block of four numbers is a function of a counter and a key, so every draw has numbers of its own,
//! whoever asks for them and in whatever order.

const MULTIPLIERS: [u64; 2] = [0xD2E7_470E_E14C_6C93, 0xCA5A_8263_9512_1157];
const WEYL: [u64; 2] = [0x9E37_79B9_7F4A_7C15, 0xBB67_AE85_84CA_A73B];
const ROUNDS: usize = 10;

/// Four numbers of 64 bits.
#[inline]
pub(super) fn block(counter: [u64; 4], key: [u64; 2]) -> [u64; 4] {
    let ([mut a, mut b, mut c, mut d], [mut k, mut l]) = (counter, key);
    for _ in 0..ROUNDS {
        let (high_a, low_a) = product(MULTIPLIERS[0], a);
        let (high_c, low_c) = product(MULTIPLIERS[1], c);
        (a, b, c, d) = (high_c ^ b ^ k, low_c, high_a ^ d ^ l, low_a);
        (k, l) = (k.wrapping_add(WEYL[0]), l.wrapping_add(WEYL[1]));
    }
    [a, b, c, d]
}

#[inline(always)]
fn product(x: u64, y: u64) -> (u64, u64) {
    let whole = u128::from(x) * u128::from(y);
    ((whole >> 64) as u64, whole as u64)
}

/// Uniform above 0 and below 1, in the middles of 2⁵² equal steps.
#[inline]
pub(super) fn uniform(bits: u64) -> f64 {
    ((bits >> 12) as f64 + 0.5) * (1.0 / (1_u64 << 52) as f64)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// numpy 2.4.6, numpy.random.Philox(counter, key).random_raw(4), which adds 1 to the counter before it begins.
    #[test]
    fn is_numpys_philox() {
        let cases = [
            (
                [1, 0, 0, 0],
                [0, 0],
                [0x02f4_ba64_08e4_d89b, 0x3dd6_2b0b_9ca8_c5b2, 0x1c86_67a5_5d90_2e79, 0x907d_7a05_2fd5_b4dc],
            ),
            (
                [5, 7, 0, 0],
                [42, 0],
                [0x5cb1_8e15_08b0_4f4f, 0x7696_f234_5c36_b662, 0x1c33_c6b1_72ef_b114, 0x379f_dcaf_de95_277e],
            ),
            (
                [u64::MAX, u64::MAX, 0, 0],
                [u64::MAX, 1],
                [0xe5d4_8b49_a3bd_ab93, 0x756c_e9e9_c22d_d11b, 0x52cd_1334_ff16_4263, 0x8fee_589a_af2b_0972],
            ),
        ];
        for (counter, key, numbers) in cases {
            assert_eq!(block(counter, key), numbers, "{counter:?} {key:?}");
        }
    }

    #[test]
    fn a_uniform_number_is_never_0_or_1() {
        assert!(uniform(0) > 0.0 && uniform(u64::MAX) < 1.0);
        assert!((uniform(1 << 63) - 0.5).abs() < 1e-15);
    }
}
