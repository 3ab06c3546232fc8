"""The same isochrones as the library's, written with vectorised numpy: the peer of isochrones.bench.ts.

Reads from standard input a JSON object with the coefficients of one metallicity, a list of log ages, and magnitudes less
the table of bolometric corrections for three bands; prints isochrones a second and, as a check that the work is the
same, luminosities and radii at the masses and times given. Coefficients and moments on the mass grid are made once, outside the
timing, as the library caches them too.
"""

import json
import sys
import time

import numpy as np

LN10 = np.log(10.0)
INPUT = json.load(sys.stdin)
A = np.array(INPUT["a"])
B = np.array(INPUT["b"])
ZL = INPUT["zeroAgeLuminosity"]
ZR = INPUT["zeroAgeRadius"]
Z, ZETA = INPUT["z"], INPUT["zeta"]
HOOK, FLASH, BRANCH = INPUT["massHook"], INPUT["massFlash"], INPUT["massGiantBranch"]
SHARE = max(0.95, min(0.95 - 0.03 * (ZETA + 0.30103), 0.99))
EPS = 0.01


def zero_age(m):
    lum = (ZL[0] * m**5.5 + ZL[1] * m**11) / (
        ZL[2] + m**3 + ZL[3] * m**5 + ZL[4] * m**7 + ZL[5] * m**8 + ZL[6] * m**9.5
    )
    rad = (ZR[0] * m**2.5 + ZR[1] * m**6.5 + ZR[2] * m**11 + ZR[3] * m**19 + ZR[4] * m**19.5) / (
        ZR[5] + ZR[6] * m**2 + ZR[7] * m**8.5 + m**18.5 + ZR[8] * m**19.5
    )
    return lum, rad


def main_times(m):
    base = (A[1] + A[2] * m**4 + A[3] * m**5.5 + m**7) / (A[4] * m**2 + A[5] * m**7)
    hook = base * np.maximum(0.5, 1 - 0.01 * np.maximum(A[6] / m ** A[7], A[8] + A[9] / m ** A[10]))
    return base, hook, np.maximum(hook, SHARE * base)


def r_tms_low(m):
    return (A[18] + A[19] * m ** A[21]) / (A[20] + m ** A[22])


def r_tms_high(m):
    return (-8.672073e-2 * m**3 + A[23] * m ** A[26] + A[24] * m ** (A[26] + 1.5)) / (A[25] + m**5)


def hook_l_high(m):
    return np.minimum(A[34] / m ** A[35], A[36] / m ** A[37])


def hook_r_high(m):
    return (A[38] + A[39] * m**3.5) / (A[40] * m**3 + m ** A[41]) - 1


def alpha_l_high(m):
    return (A[45] + A[46] * m ** A[48]) / (m**0.4 + A[47] * m**1.9)


def alpha_r_high(m):
    return A[58] * m ** A[60] / (A[59] + m ** A[61])


def beta_r_middle(m):
    return A[69] * m**3.5 / (A[70] + m ** A[71])


def gamma_low(m):
    return A[76] + A[77] * np.abs(m - A[78]) ** A[79]


def tms(m, r_zams):
    lum = (A[11] * m**3 + A[12] * m**4 + A[13] * m ** (A[16] + 1.8)) / (A[14] + A[15] * m**5 + m ** A[16])
    star = A[17] + 0.1
    low = r_tms_low(m)
    low = np.where(m < 0.5, np.maximum(low, 1.5 * r_zams), low)
    between = r_tms_low(A[17]) + (r_tms_high(star) - r_tms_low(A[17])) * (m - A[17]) / 0.1
    return lum, np.where(m >= star, r_tms_high(m), np.where(m > A[17], between, low))


def main_sequence(m, t):
    base, t_hook, t_ms = main_times(m)
    l0, r0 = zero_age(m)
    l1, r1 = tms(m, r0)
    tau = np.clip(t / t_ms, 0, 1)
    dl = np.where(m >= A[33], hook_l_high(m), hook_l_high(A[33]) * (np.maximum(m - HOOK, 0) / (A[33] - HOOK)) ** 0.4)
    dl = np.where(m <= HOOK, 0, dl)
    low = A[43] * np.sqrt(np.maximum(m - HOOK, 0) / (A[42] - HOOK))
    mid = A[43] + (hook_r_high(2.0) - A[43]) * (np.clip(m - A[42], 0, None) / (2 - A[42])) ** A[44]
    dr = np.where(m >= 2, hook_r_high(m), np.where(m <= A[42], low, mid))
    dr = np.where(m <= HOOK, 0, dr)
    al2 = alpha_l_high(2.0)
    al = np.select(
        [m >= 2, m < 0.5, m < 0.7, m < A[52], m < A[53]],
        [
            alpha_l_high(m),
            A[49],
            A[49] + 5 * (0.3 - A[49]) * (m - 0.5),
            0.3 + (A[50] - 0.3) * (m - 0.7) / (A[52] - 0.7),
            A[50] + (A[51] - A[50]) * (m - A[52]) / (A[53] - A[52]),
        ],
        A[51] + (al2 - A[51]) * (m - A[53]) / (2 - A[53]),
    )
    b57 = max(0, A[54] - A[55] * A[57] ** A[56])
    bl = np.maximum(0, A[54] - A[55] * m ** A[56])
    bl = np.where((m > A[57]) & (bl > 0), np.maximum(0, b57 - 10 * (m - A[57]) * b57), bl)
    eta = np.where((Z <= 0.0009) | (m <= 1), 10, np.where(m >= 1.1, 20, 10 + 100 * (m - 1)))
    ar = np.select(
        [m > A[67], m >= A[66], m >= A[68], m < 0.5, m < 0.65],
        [
            alpha_r_high(A[67]) + A[65] * (m - A[67]),
            alpha_r_high(m),
            A[64] + (alpha_r_high(A[66]) - A[64]) * (m - A[68]) / (A[66] - A[68]),
            A[62],
            A[62] + (A[63] - A[62]) * (m - 0.5) / 0.15,
        ],
        A[63] + (A[64] - A[63]) * (m - 0.65) / (A[68] - 0.65),
    )
    br = np.select(
        [m <= 1, m < A[74], m < 2, m <= 16],
        [
            1.06,
            1.06 + (A[72] - 1.06) * (m - 1) / (A[74] - 1),
            A[72] + (beta_r_middle(2.0) - A[72]) * (m - A[74]) / (2 - A[74]),
            beta_r_middle(m),
        ],
        beta_r_middle(16.0) + A[73] * (m - 16),
    ) - 1
    g1 = gamma_low(1.0)
    end = A[80] if A[75] > 1 else g1
    rise = (np.maximum(m - 1, 0) / (A[75] - 1)) ** A[81] if A[75] > 1 else 0
    ga = np.select(
        [m <= 1, m <= A[75], m < A[75] + 0.1],
        [gamma_low(m), g1 + (A[80] - g1) * rise, end * (1 - 10 * (m - A[75]))],
        0,
    )
    ga = np.maximum(0, ga)
    one = np.minimum(1, t / t_hook)
    two = np.clip((t - (1 - EPS) * t_hook) / (EPS * t_hook), 0, 1)
    log_l = al * tau + bl * tau**eta + (np.log10(l1 / l0) - al - bl) * tau**2 - dl * (one**2 - two**2)
    log_r = (
        ar * tau + br * tau**10 + ga * tau**40 + (np.log10(r1 / r0) - ar - br - ga) * tau**3 - dr * (one**3 - two**3)
    )
    rad = r0 * 10**log_r
    return l0 * 10**log_l, np.where(m < 0.3, np.maximum(rad, 0.0258 * (1.76 - 3 * Z) ** (5 / 3) / np.cbrt(m)), rad)


def l_bgb(m):
    return (A[27] * m ** A[31] + A[28] * m**9.301992) / (A[29] + A[30] * m**4.637345 + m ** A[32])


def gb_factor(m):
    return np.minimum(B[4] / m ** B[5], B[6] / m ** B[7])


def gb_radius(factor, lum):
    return factor * (lum ** B[1] + B[2] * lum ** B[3])


def agb_factor_high(m):
    return np.minimum(B[51] / m ** B[52], B[53] / m ** B[54])


def agb_law(m):
    high = B[55] * B[3]
    x = np.clip((m - FLASH + 0.2) / 0.2, 0, 1)
    low = B[56] + B[57] * np.minimum(m, FLASH - 0.2)
    factor = np.where(m >= FLASH, agb_factor_high(m), low + (agb_factor_high(FLASH) - low) * x)
    return factor, np.where(m >= FLASH, high, B[3] + (high - B[3]) * x)


def agb_radius(law, lum):
    return law[0] * (lum ** B[1] + B[2] * lum ** law[1])


def ln_d_high(m):
    d0 = 5.37 + 0.135 * ZETA
    return LN10 * np.maximum(-1, np.maximum(0.975 * d0 - 0.18 * m, 0.5 * d0 - 0.06 * m))


def relation(m):
    share = np.clip((m - FLASH) / (2.5 - FLASH), 0, 1)
    low = LN10 * (5.37 + 0.135 * ZETA)
    ln_d = np.where(m >= 2.5, ln_d_high(m), low + (ln_d_high(2.5) - low) * share)
    p, q = 6 - share, 3 - share
    ln_b = np.log(np.maximum(3e4, 500 + 1.75e4 * m**0.6))
    cross = (ln_b - ln_d) / (p - q)
    return p, q, ln_b, ln_d, np.exp(cross), np.exp(ln_d + p * cross)


def core_of(rel, lum):
    p, q, ln_b, ln_d, _, lx = rel
    return np.where(lum <= lx, np.exp((np.log(lum) - ln_d) / p), np.exp((np.log(lum) - ln_b) / q))


def lum_of(rel, core):
    p, q, ln_b, ln_d, mx, _ = rel
    return np.where(core <= mx, np.exp(ln_d + p * np.log(core)), np.exp(ln_b + q * np.log(core)))


def clock(rel, rate, lum, start):
    p, q, ln_b, ln_d, _, lx = rel
    low = lambda l: np.exp((p - 1) / p * (ln_d - np.log(l)) - ln_d) / ((p - 1) * rate)
    high = lambda l: np.exp((q - 1) / q * (ln_b - np.log(l)) - ln_b) / ((q - 1) * rate)
    above = lum >= lx
    inf1 = np.where(above, start, start + low(lum))
    cross = np.where(above, start, inf1 - low(lum) * (lum / lx) ** ((p - 1) / p))
    inf2 = cross + np.where(above, high(lum), high(lx))
    time_at = lambda l: np.where(l <= lx, inf1 - low(l), inf2 - high(l))

    def core_at(t):
        first = (t <= cross) & ~above
        x = np.maximum(inf1 - t, 1e-300)
        y = np.maximum(inf2 - t, 1e-9 * (inf2 - start) + 1e-300)
        return np.where(
            first,
            np.exp((np.log((p - 1) * rate * x) + ln_d) / (1 - p)),
            np.exp((np.log((q - 1) * rate * y) + ln_b) / (1 - q)),
        )

    return time_at, core_at


def l_he_naked(m):
    return 15262 * m**10.25 / (m**9 + 29.54 * m**7.5 + 31.18 * m**6 + 0.0469)


def r_he_naked(m):
    return 0.2391 * m**4.6 / (m**4 + 0.162 * m**3 + 0.0065)


def l_hei_high(m):
    return (B[11] + B[12] * m**3.8) / (B[13] + m**2)


def l_bagb_high(m):
    return (B[31] + B[32] * m ** (B[33] + 1.8)) / (B[34] + m ** B[33])


def blue_high(m):
    return (B[24] * m + (B[25] * m) ** B[26] * m ** B[28]) / (B[27] + m ** B[28])


C_LEAST = B[17] / BRANCH**0.1 + (B[16] * B[17] - B[14]) / BRANCH ** (B[15] + 0.1)


def least_high(m, lum):
    return lum * (B[14] + C_LEAST * m ** (B[15] + 0.1)) / (B[16] + m ** B[15])


ALPHA1 = (B[9] * FLASH ** B[10] - l_hei_high(FLASH)) / l_hei_high(FLASH)
ALPHA3 = (B[29] * FLASH ** B[30] - l_bagb_high(FLASH)) / l_bagb_high(FLASH)
LEAST_FLASH = least_high(FLASH, l_hei_high(FLASH))
REL_FLASH = relation(np.array([FLASH]))
QUARTIC = 9.20925e-5 * FLASH**5.402216
C_BASE = core_of(REL_FLASH, l_bgb(FLASH))[0] ** 4 - QUARTIC
C_IGN = core_of(REL_FLASH, l_hei_high(FLASH))[0] ** 4 - QUARTIC
T_FLASH = main_times(FLASH)[0] * (B[41] * FLASH ** B[42] + B[43] * FLASH**5) / (B[44] + FLASH**5)
ALPHA4 = (T_FLASH - B[39]) / B[39]


def horizontal(m, core, mu):
    naked = l_he_naked(core)
    alpha2 = (B[18] + naked - LEAST_FLASH) / (LEAST_FLASH - naked)
    share = (1 + B[20]) / (1 + B[20] * mu**1.6479)
    return naked + share * B[18] * mu ** B[19] / (1 + alpha2 * np.exp(15 * (m - FLASH)))


CORE_FLASH = core_of(REL_FLASH, l_hei_high(FLASH))[0]
BLUE_RATIO = np.log(blue_high(FLASH) / gb_radius(gb_factor(FLASH), horizontal(FLASH, CORE_FLASH, 1.0)))


def f_blue(m, blue, agb):
    return m ** B[48] * np.maximum(0, 1 - blue / agb) ** B[49]


F_BRANCH = f_blue(
    BRANCH, blue_high(BRANCH), agb_radius((agb_factor_high(BRANCH), B[55] * B[3]), l_hei_high(BRANCH))
)


class Giants:
    """Landmarks of stars after the main sequence, one entry a star."""

    def __init__(self, m):
        self.m = m
        base, _, self.t_ms = main_times(m)
        self.base = base
        self.rel = relation(m)
        self.flash, self.early = m < FLASH, m >= BRANCH
        self.l_bgb = l_bgb(m)
        self.gb = gb_factor(m)
        self.agb = agb_law(m)
        self.l_hei = np.where(
            self.flash, B[9] * m ** B[10] / (1 + ALPHA1 * np.exp(15 * np.minimum(m - FLASH, 0))), l_hei_high(m)
        )
        self.l_bagb = np.where(
            self.flash, B[29] * m ** B[30] / (1 + ALPHA3 * np.exp(15 * np.minimum(m - FLASH, 0))), l_bagb_high(m)
        )
        self.core_bagb = (B[36] * m ** B[37] + B[38]) ** 0.25
        rate = 10 ** np.maximum(-4.8, np.minimum(-5.7 + 0.8 * m, -4.1 + 0.14 * m))
        time_at, self.branch_core = clock(self.rel, rate, self.l_bgb, base)
        self.t_hei = np.where(self.early, base, np.maximum(base, time_at(self.l_hei)))
        quartic = lambda c: np.minimum(0.95 * self.core_bagb, (c + 9.20925e-5 * m**5.402216) ** 0.25)
        self.core_hei = np.where(self.flash, core_of(self.rel, self.l_hei), quartic(C_IGN))
        mu = np.clip((m - self.core_hei) / (FLASH - self.core_hei), 1e-9, 1)
        zahb = horizontal(np.minimum(m, FLASH), np.minimum(self.core_hei, 0.6), mu)
        giant = gb_radius(self.gb, zahb)
        f = (1 + B[21]) * mu ** B[22] / (1 + B[21] * mu ** B[23])
        r_zahb = (1 - f) * r_he_naked(self.core_hei) + f * giant
        life = (0.4129 + 18.81 * self.core_hei**4 + 1.853 * self.core_hei**6) / self.core_hei**6.5
        low = (B[39] + (life - B[39]) * (1 - mu) ** B[40]) * (1 + ALPHA4 * np.exp(15 * np.minimum(m - FLASH, 0)))
        high = base * (B[41] * m ** B[42] + B[43] * m**5) / (B[44] + m**5)
        self.duration = np.where(self.flash, low, high)
        agb_hei = agb_radius(self.agb, self.l_hei)
        fitted = blue_high(m)
        ln_ratio = np.log(m / BRANCH)
        power = np.maximum(0, ln_ratio / np.log(FLASH / BRANCH))
        blue_im = B[45] * (m / BRANCH) ** 0.414 + (1 - B[45] * (FLASH / BRANCH) ** 0.414) * power ** B[46]
        blue_hm = (1 - B[47]) * f_blue(m, fitted, agb_hei) / F_BRANCH if F_BRANCH > 0 else np.zeros_like(m)
        self.tau_x = np.where(self.flash | self.early, 0, 1 - np.clip(blue_im, 0, 1))
        self.tau_y = np.where(self.early, np.clip(blue_hm, 0, 1), 1.0)
        self.l_x = np.select([self.flash, self.early], [zahb, self.l_hei], least_high(m, self.l_hei))
        blue = np.select(
            [self.flash, self.early], [giant * np.exp(BLUE_RATIO * m / FLASH), np.minimum(fitted, agb_hei)], fitted
        )
        gb_hei = gb_radius(self.gb, self.l_hei)
        mix = np.clip(ln_ratio / np.log(12 / BRANCH), 0, 1)
        r_hm = np.where(
            self.tau_y == 0, agb_hei, np.where(m >= max(12, BRANCH), blue, gb_hei * (blue / gb_hei) ** mix)
        )
        self.r_x = np.select([self.flash, self.early], [r_zahb, r_hm], gb_radius(self.gb, self.l_x))
        self.xi = np.clip(blue / self.r_x, 0.4, 2.5)
        self.r_min = np.minimum(blue, self.r_x)
        self.t_bagb = self.t_hei + self.duration
        self.l_gap = np.where(self.early, self.l_hei, self.l_bgb)
        self.r_gap = np.where(self.early, self.r_x, gb_radius(self.gb, self.l_bgb))
        sn = np.maximum(1.44, 0.773 * self.core_bagb - 0.35)
        early_at, self.early_core = clock(self.rel, 7.66e-5, self.l_bagb, self.t_bagb)
        collapse = self.core_bagb >= 2.25
        dredge = np.minimum(np.where(self.core_bagb > 0.8, 0.44 * self.core_bagb + 0.448, self.core_bagb), m)
        final = np.select([m < 2.85, m < 3.6], [0.08 * m + 0.489, 0.187 * m + 0.184], 0.107 * m + 0.471)
        end = np.minimum(np.minimum(np.maximum(dredge, final), sn), m)
        l_du = lum_of(self.rel, np.where(collapse, sn, np.minimum(dredge, end)))
        self.t_du = np.maximum(self.t_bagb, early_at(l_du))
        lam = np.minimum(0.9, 0.3 + 0.001 * m**5)
        both = rate * 7.66e-5 / (rate + 7.66e-5)
        pulse_at, self.pulse_core = clock(self.rel, both, np.maximum(l_du, self.l_bagb), self.t_du)
        last = np.maximum(self.t_du, pulse_at(lum_of(self.rel, dredge + (end - dredge) / (1 - lam))))
        self.t_end = np.where(collapse | (end <= dredge), self.t_du, last)

    def helium_lum(self, tau):
        left = np.maximum(self.tau_x - tau, 0) / np.where(self.tau_x > 0, self.tau_x, 1)
        share = np.clip((tau - self.tau_x) / np.where(self.tau_x < 1, 1 - self.tau_x, 1), 0, 1)
        return np.where(
            tau < self.tau_x,
            self.l_x * (self.l_hei / self.l_x) ** (left**3),
            self.l_x * (self.l_bagb / self.l_x) ** (share**self.xi),
        )

    def state(self, t):
        m = self.m
        base = self.base
        _, r0 = zero_age(m)
        l1, r1 = tms(m, r0)
        tau = np.clip((t - self.t_ms) / (base - self.t_ms), 0, 1)
        gap = l1 * (self.l_gap / l1) ** tau, r1 * (self.r_gap / r1) ** tau
        l_gb = lum_of(self.rel, self.branch_core(np.clip(t, base, self.t_hei)))
        branch = l_gb, gb_radius(self.gb, l_gb)
        tau = np.clip((t - self.t_hei) / self.duration, 0, 1)
        l_he = self.helium_lum(tau)
        width = np.where(self.tau_y > self.tau_x, self.tau_y - self.tau_x, 1)
        r_y = agb_radius(self.agb, self.helium_lum(self.tau_y))
        q = (
            np.cbrt(np.log(r_y / self.r_min)) * (tau - self.tau_x)
            - np.cbrt(np.log(self.r_x / self.r_min)) * (self.tau_y - tau)
        ) / width
        inside = np.clip(np.abs(q) ** 3, 0, 50)
        agb_l = agb_radius(self.agb, l_he)
        r_he = np.where(
            tau < self.tau_x,
            gb_radius(self.gb, l_he),
            np.where((tau > self.tau_y) | (self.tau_y <= self.tau_x), agb_l, self.r_min * np.exp(inside)),
        )
        l_early = lum_of(self.rel, self.early_core(np.clip(t, self.t_bagb, self.t_du)))
        l_pulse = lum_of(self.rel, self.pulse_core(np.clip(t, self.t_du, self.t_end)))
        cases = [t <= base, t <= self.t_hei, t <= self.t_bagb, t <= self.t_du]
        lum = np.select(cases, [gap[0], branch[0], l_he, l_early], l_pulse)
        rad = np.select(
            cases,
            [gap[1], branch[1], r_he, agb_radius(self.agb, l_early)],
            agb_radius(self.agb, l_pulse),
        )
        return lum, rad

    def moments(self):
        return [self.base, self.t_hei, self.t_bagb, self.t_du, self.t_end]


def states(m, t):
    """Luminosity and radius of stars of one age: main sequence and later stars apart, each once."""
    on_main = t <= main_times(m)[2]
    lum, rad = np.empty_like(m), np.empty_like(m)
    lum[on_main], rad[on_main] = main_sequence(m[on_main], t)
    rest = m[~on_main]
    if rest.size:
        lum[~on_main], rad[~on_main] = Giants(rest).state(t)
    return lum, rad


def moments(m):
    _, hook, end = main_times(m)
    return np.array([(1 - EPS) * hook, hook, end, *Giants(m).moments()])


GRID = np.sort(
    np.concatenate(
        [np.geomspace(0.1, 100, 200), FLASH - 0.12 + 0.005 * np.arange(25), [FLASH, BRANCH, BRANCH * (1 - 1e-11)]]
    )
)
TABLE = np.log(moments(GRID))


def roots(t):
    """All masses at which a moment comes at t: bracketed on the grid, then the secant rule for all brackets at once."""
    sign = TABLE - np.log(t)
    which, at = np.nonzero(sign[:, :-1] * sign[:, 1:] < 0)
    low, high = GRID[at].copy(), GRID[at + 1].copy()
    f_low, f_high = sign[which, at].copy(), sign[which, at + 1].copy()
    index = np.arange(which.size)
    for _ in range(9):
        mid = (low * f_high - high * f_low) / (f_high - f_low)
        f = np.log(moments(mid))[which, index] - np.log(t)
        left = f * f_low > 0
        f_high = np.where(left, f_high / 2, f)
        high = np.where(left, high, mid)
        f_low = np.where(left, f, f_low / 2)
        low = np.where(left, mid, low)
        if np.all(np.abs(f) < 2e-13):
            break
    return mid


# Coefficients of cubic B-splines in log temperature, one row a knot: dwarfs first, what giants differ by fourth.
LIGHT = [np.array(column).reshape(-1, 6) for column in INPUT["light"]]
GRID_START, GRID_STEP = INPUT["grid"]
LOG_SUN = np.log10(5772.0)


def smooth(t):
    t = np.clip(t, 0, 1)
    return t * t * t * (10 + t * (6 * t - 15))


def magnitudes(log_l, log_t, log_g):
    share = smooth((4 - 0.5 * smooth((log_t - 3.85) * 10) - log_g) / 1.8)
    at = (log_t - GRID_START) / GRID_STEP
    i = np.clip(at.astype(int), 0, len(LIGHT[0]) - 4)
    u = at - i
    v = 1 - u
    weights = [v**3 / 6, (u * u * (3 * u - 6) + 4) / 6, None, u**3 / 6]
    weights[2] = 1 - weights[0] - weights[1] - weights[3]
    return [
        4.74 - 2.5 * log_l - sum(w * (table[i + k, 0] + share * table[i + k, 3]) for k, w in enumerate(weights))
        for table in LIGHT
    ]


def isochrone(log_age, points=400):
    t = 10 ** (log_age - 6)
    cut = np.unique(np.concatenate([[0.1], roots(t)]))
    nodes = np.concatenate(
        [np.linspace(lo, hi, 25 if i == 0 else 21) for i, (lo, hi) in enumerate(zip(cut[:-1], cut[1:]))]
    )
    nodes = np.minimum(nodes, cut[-1] * (1 - 1e-13))
    lum, rad = states(nodes, t)
    y = np.log10(lum)
    x = 2 * (y - 2 * np.log10(rad))
    path = np.concatenate([[0], np.cumsum(np.hypot(np.diff(x), np.diff(y)))])
    mass = np.interp(np.linspace(0, path[-1], points), path, nodes)
    lum, rad = states(mass, t)
    log_l, log_r = np.log10(lum), np.log10(rad)
    log_t = LOG_SUN + 0.25 * (log_l - 2 * log_r)
    log_g = 4.438 + np.log10(mass) - 2 * log_r
    weight = np.gradient(mass)
    light = magnitudes(log_l, log_t, log_g)
    return mass, log_l, log_t, log_g, weight, light


with np.errstate(all="ignore"):
    check = [
        [float(v[0]) for v in (main_sequence if t <= main_times(m)[2] else states)(np.array([float(m)]), t)]
        for m, t in INPUT["check"]
    ]
    ages = INPUT["logAges"]
    isochrone(ages[0])
    start = time.perf_counter()
    done = 0
    while done < len(ages) or time.perf_counter() - start < INPUT["seconds"]:
        isochrone(ages[done % len(ages)])
        done += 1
    rate = done / (time.perf_counter() - start)
places = [np.array(column) for column in INPUT["lightCheck"]]
light = [column.tolist() for column in magnitudes(*places)]
json.dump({"rate": rate, "check": check, "light": light}, sys.stdout)
