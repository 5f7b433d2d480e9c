/**
 * Writes test/fixtures/stars-mpmath.json: spheres in equilibrium by mpmath 1.3.0 (Python), 30 digits.
 *
 *     node test/generators/stars-mpmath.mjs      (some minutes; needs python3 with mpmath)
 *
 * Taylor series of the equations in the radius, of high order and with recurrences for the powers: no Runge-Kutta method, no
 * potential as variable, nothing of src. Runs of other order and step agree to 18 digits or more.
 *
 * - Lane-Emden: xi_1 and -xi_1^2 theta'(xi_1) for indices that no table has, theta at two radii.
 * - The isothermal function: psi and xi^2 psi' at some radii; the critical sphere of Bonnor and Ebert.
 * - Relativistic polytropes P = K rho^(1+1/n), energy density rho c^2 + n P, in units G = c = K = 1, by central P/rho:
 *   mass, baryon mass, radius; moment of inertia by Hartle's second-order equation for omega bar with both its
 *   metric functions; Love number k_2 by Hinderer's second-order equation for H and the closed form in logarithms
 *   (40 digits make its cancellation harmless).
 */
import { execFileSync } from "node:child_process";
import { writeFileSync } from "node:fs";

const program = `
import json, sys
from mpmath import mp, mpf, log, exp, sqrt, nstr
mp.dps = 40
out = {}
DIGITS = 24

def power_next(a, c, p, k):
    """Coefficient k of a^p from those below: a c' = p a' c."""
    return sum((p*j - (k-j))*a[j]*c[k-j] for j in range(1, k+1))/(k*a[0])

def lane_emden(n, at, order=44, digits=40):
    n = mpf(n); eps = mpf(10)**-digits
    N = 60
    a = [mpf(0)]*N; c = [mpf(0)]*N; a[0] = c[0] = mpf(1)
    for k in range(N-1):
        a[k+1] = -c[k]/((2*k+2)*(2*k+3)); c[k+1] = power_next(a, c, n, k+1)
    x = mpf('0.1'); u = x*x
    y = sum(a[k]*u**k for k in range(N)); z = sum(2*k*a[k]*x**(2*k-1) for k in range(1, N))
    found = {}
    targets = [mpf(t) for t in at]
    while True:
        a = [y, z] + [mpf(0)]*order; c = [y**n] + [mpf(0)]*order
        for k in range(order):
            a[k+2] = -((k+1)*(k+2)*a[k+1] + x*c[k] + (c[k-1] if k > 0 else 0))/(x*(k+2)*(k+1))
            c[k+1] = power_next(a, c, n, k+1)
        if y < mpf(10)**-14:
            m = -x*x*z
            return 1/(1/x - y/m), m + x*x*y**(n+1)/(-z*(n+1)), found
        h = min((eps/abs(a[order+1]))**(mpf(1)/(order+1)), (eps/abs(a[order]))**(mpf(1)/order), x)
        for t in targets:
            if x <= t < x + h:
                d = t - x; found[nstr(t)] = [nstr(sum(a[k]*d**k for k in range(order+2)), DIGITS)]
        while True:
            yn = sum(a[k]*h**k for k in range(order+2))
            if yn > 0: break
            h /= 2
        z = sum(k*a[k]*h**(k-1) for k in range(1, order+2)); y = yn; x += h

out['laneEmden'] = []
for n in ['0.1', '0.3333', '0.75', '2.718281828', '3.25', '4.75', '4.9', '4.99', '4.999']:
    n_exact = mpf(float(n))
    at = ['0.5', '2']
    x, m, f = lane_emden(n_exact, at)
    out['laneEmden'].append({'n': n, 'radius': nstr(x, DIGITS), 'mass': nstr(m, DIGITS), 'theta': {t: f[nstr(mpf(t))][0] for t in at}})
    print(n, nstr(x, 15), file=sys.stderr, flush=True)

def isothermal(at, order=44, digits=40, critical=False):
    eps = mpf(10)**-digits
    N = 60
    a = [mpf(0)]*N; c = [mpf(0)]*N; c[0] = mpf(1)   # psi, e^-psi in u = x^2
    for k in range(N-1):
        a[k+1] = c[k]/((2*k+2)*(2*k+3)); c[k+1] = -sum(j*a[j]*c[k+1-j] for j in range(1, k+2))/(k+1)
    x = mpf('0.1'); u = x*x
    y = sum(a[k]*u**k for k in range(N)); z = sum(2*k*a[k]*x**(2*k-1) for k in range(1, N))
    found = []
    targets = [mpf(t) for t in at]
    while x <= max(targets):
        a = [y, z] + [mpf(0)]*order; c = [exp(-y)] + [mpf(0)]*order
        for k in range(order):
            a[k+2] = (-(k+1)*(k+2)*a[k+1] + x*c[k] + (c[k-1] if k > 0 else 0))/(x*(k+2)*(k+1))
            c[k+1] = -sum(j*a[j]*c[k+1-j] for j in range(1, k+2))/(k+1)
        h = min((eps/abs(a[order+1]))**(mpf(1)/(order+1)), (eps/abs(a[order]))**(mpf(1)/order), x)
        value = lambda d: sum(a[k]*d**k for k in range(order+2))
        slope = lambda d: sum(k*a[k]*d**(k-1) for k in range(1, order+2))
        for t in targets:
            if x <= t < x + h: found.append({'xi': nstr(t), 'potential': nstr(value(t-x), DIGITS), 'mass': nstr(t*t*slope(t-x), DIGITS)})
        if critical:
            g = lambda d: slope(d)**2 - 2*exp(-value(d))
            if g(mpf(0)) < 0 and g(h) >= 0:
                d = mp.findroot(g, (mpf(0), h), solver='anderson'); t = x + d
                return {'radius': nstr(t, DIGITS), 'densityRatio': nstr(exp(value(d)), DIGITS), 'mass': nstr(t*t*slope(d)*exp(-value(d)/2)/sqrt(4*mp.pi), DIGITS)}
        y, z = value(h), slope(h); x += h
    return found
out['isothermal'] = isothermal(['0.5', '2', '6.5', '34.36', '1000', '1e6'])
out['bonnorEbert'] = isothermal(['10'], critical=True)

def star(n, b, order=26, digits=28):
    """G = c = K = 1: q = P/rho = rho^(1/n), central value b. State: q, m, mb, lnnu-free; series in r."""
    n = mpf(n); b = mpf(b); eps = mpf(10)**-digits
    pi4 = 4*mp.pi
    # unknowns about r0: q(r) = P/rho obeys dq/dr (n+1) = -(1 + (n+1) q) (m + 4 pi r^3 P)/(r (r - 2m)).
    # Start: small r by the two leading terms, at r so small that the rest is below eps.
    rho = b**n; P = rho*b; e = rho + n*P
    scale = sqrt((n+1)*b/(pi4*rho))
    K = 18
    # series in u=r^2 around the centre by fixed-point iteration on truncated series
    def mul(A, B): return [sum(A[j]*B[k-j] for j in range(k+1)) for k in range(K)]
    def inv(A):
        R = [1/A[0]]
        for k in range(1, K): R.append(-sum(A[j]*R[k-j] for j in range(1, k+1))/A[0])
        return R
    def powr(A, p):
        C = [A[0]**p]
        for k in range(1, K): C.append(power_next(A, C, p, k))
        return C
    q = [b] + [mpf(0)]*(K-1)
    for it in range(K):
        rh = powr(q, n); Ps = mul(rh, q); es = [rh[k] + n*Ps[k] for k in range(K)]
        v = [pi4*es[k]/(2*k+3) for k in range(K)]                      # m/r^3
        one = [mpf(1)] + [mpf(0)]*(K-1)
        den = [one[k] - (2*v[k-1] if k > 0 else 0) for k in range(K)]
        f = mul(mul([one[k] + (n+1)*q[k] for k in range(K)], [v[k] + pi4*Ps[k] for k in range(K)]), inv(den))
        q = [b] + [-f[k-1]/((n+1)*2*k) for k in range(1, K)]           # dq/du = -f/(2(n+1))
    rh = powr(q, n); Ps = mul(rh, q); es = [rh[k] + n*Ps[k] for k in range(K)]
    v = [pi4*es[k]/(2*k+3) for k in range(K)]
    den = [one[k] - (2*v[k-1] if k > 0 else 0) for k in range(K)]
    w = mul(rh, powr(den, mpf(-1)/2)); mb = [pi4*w[k]/(2*k+3) for k in range(K)]
    r = scale/40; u = r*r
    ev = lambda A: sum(A[k]*u**k for k in range(K))
    # omega bar = 1 + o2 u + ..., H = r^2 (1 + ...): by their equations with series coefficients
    # j'/j = -4 pi r (e+P)/(1-2m/r) =: -r J;  w'' + (4/r - rJ) w' - 4 J w = 0, in u.
    J = mul([pi4*(es[k] + Ps[k]) for k in range(K)], inv(den))
    om = [mpf(1)] + [mpf(0)]*(K-1)
    for k in range(K-1):
        # 2(k+1)(2k+1) + 8(k+1) of om[k+1] = sum_j J_j (2(k-j) + 4) om_{k-j}
        om[k+1] = sum(J[j]*(2*(k-j) + 4)*om[k-j] for j in range(k+1))/((k+1)*(4*k+10))
    # H'' + H' (2/r + r A) + H (-6/(r^2 den) + B) = 0, A = 2v/den + 4 pi (P - e)/den,
    # B = 4 pi (5 e + 9 P + (e + P) de/dP)/den - (2 r (v + 4 pi P)/den)^2
    iden = inv(den)
    A = mul([2*v[k] + pi4*(Ps[k] - es[k]) for k in range(K)], iden)
    # de/dP = (e+P)/(Gamma P), Gamma = 1 + 1/n
    dedp = mul([es[k] + Ps[k] for k in range(K)], [x*n/(n+1) for x in inv(Ps)])
    B0 = mul([5*es[k] + 9*Ps[k] + y for k, y in zip(range(K), mul([es[k] + Ps[k] for k in range(K)], dedp))], iden)
    nu = mul([2*(v[k] + pi4*Ps[k]) for k in range(K)], iden)           # nu' = r * this
    nn = mul(nu, nu)
    B = [pi4*B0[k] - (nn[k-1] if k > 0 else 0) for k in range(K)]
    H = [mpf(1)] + [mpf(0)]*(K-1)                                      # H = r^2 sum H_k u^k
    for k in range(1, K):
        # (2k+2)(2k+1) + 2(2k+2) - 6 = (2k+2)(2k+3) - 6
        rhs = -sum(A[j]*(2*(k-1-j) + 2)*H[k-1-j] for j in range(k)) - sum(B[j]*H[k-1-j] for j in range(k)) + 6*sum(iden[j]*H[k-j] for j in range(1, k+1))
        H[k] = rhs/((2*k+2)*(2*k+3) - 6)
    state = [ev(q), ev(v)*r**3, ev(mb)*r**3, ev(om), sum(2*k*om[k]*r**(2*k-1) for k in range(1, K)), u*ev(H), sum((2*k+2)*H[k]*r**(2*k+1) for k in range(K))]
    # Taylor steps in r
    while True:
        Q = [state[0]]; M = [state[1]]; MB = [state[2]]; O = [state[3]]; O1 = [state[4]]; Hh = [state[5]]; H1 = [state[6]]
        R = [r, mpf(1)]
        rh = [state[0]**n]
        def conv(X, Y, k): return sum(X[j]*Y[k-j] for j in range(max(0, k-len(Y)+1), min(k, len(X)-1)+1))
        P_ = []; E_ = []; D_ = []; S_ = []; ID = []; IR = []; X1 = []; F1 = []; J_ = []; RS = []; A_ = []; B_ = []; DE = []; R2 = [r*r, 2*r, mpf(1)]; R3 = [r**3, 3*r*r, 3*r, mpf(1)]; MR = []; NU = []; IP = []; T1=[];T2=[];EP=[];EPD=[];SI=[]
        for k in range(order+1):
            P_.append(conv(rh, Q, k)); E_.append(rh[k] + n*P_[k]); EP.append(E_[k] + P_[k])
            IR.append(1/r if k == 0 else -IR[k-1]/r)
            MR.append(conv(M, IR, k))
            D_.append((1 if k == 0 else 0) - 2*MR[k])                  # 1 - 2m/r
            ID.append(1/D_[0] if k == 0 else -sum(D_[j]*ID[k-j] for j in range(1, k+1))/D_[0])
            SI.append(ID[0]**mpf('0.5') if k == 0 else power_next(ID, SI, mpf('0.5'), k))
            T1.append(MR[k] + pi4*conv(R2, P_, k))                     # m/r + 4 pi r^2 P
            NU.append(2*conv(conv_list(T1, IR, k+1), ID, k))           # nu'
            X1.append((1 if k == 0 else 0) + (n+1)*Q[k])
            Q.append(-conv(X1, NU, k)/(2*(n+1)*(k+1)))
            M.append(pi4*conv(R2, E_, k)/(k+1))
            MB.append(pi4*conv(conv_list(R2, rh, k+1), SI, k)/(k+1))
            J_.append(pi4*conv(conv_list(R[:2], EP, k+1), ID, k))      # -j'/j
            O.append(O1[k]/(k+1))
            O1.append((-conv([4*x for x in IR], O1, k) + conv(J_, O1, k) + 4*conv(conv_list(J_, O, k+1), IR, k))/(k+1))
            IP.append(1/P_[0] if k == 0 else -sum(P_[j]*IP[k-j] for j in range(1, k+1))/P_[0])
            EPD.append(conv(conv_list(EP, EP, k+1), IP, k)*n/(n+1))
            A_.append(2*IR[k] + conv(conv_list(ID, [2*x for x in MR], k+1), IR, k) + pi4*conv(conv_list(R[:2], [P_[i] - E_[i] for i in range(k+1)], k+1), ID, k))
            B_.append(pi4*conv([5*E_[i] + 9*P_[i] + EPD[i] for i in range(k+1)], ID, k) - 6*conv(conv_list(IR, IR, k+1), ID, k) - conv(NU, NU, k))
            Hh.append(H1[k]/(k+1))
            H1.append((-conv(A_, H1, k) - conv(B_, Hh, k))/(k+1))
            rh.append(power_next(Q, rh, n, k+1))
        top = order
        if state[0] < mpf(10)**-11*b:
            break
        h = min([(eps*abs(X[0])/abs(X[top]))**(mpf(1)/top) for X in (Q, M, O, Hh)] + [r])
        while True:
            qn = sum(Q[k]*h**k for k in range(top+1))
            if qn > 0: break
            h /= 2
        state = [sum(X[k]*h**k for k in range(top+1)) for X in (Q, M, MB, O, O1, Hh, H1)]
        r += h
    q, m, mbary, o, o1, H, H1 = state
    # to the surface: q = 0, linear (q is 1e-11 of the centre: the error is its square, in k_2 its power 1.75)
    nu = 2*(m/r)/(r*(1-2*m/r))
    d = q*2*(n+1)/nu
    # first order in d; the stiffness term of H'' goes like q^(n-1), its integral is its value times d/n
    H1 += d*(-A_[0]*H1 - B_[0]*H) - H*pi4*EPD[0]*ID[0]*d*(1/n - 1)
    o1 += d*(-4*o1/r + J_[0]*(o1 + 4*o/r)); o += d*o1; H += d*H1
    r += d; y = r*(H1/H)
    I = r**4*o1/6/(o + r*o1/3)                                         # J = r^4 w'/6, Omega = w + 2J/r^3
    C = m/r
    k2 = mpf(8)/5*C**5*(1-2*C)**2*(2 + 2*C*(y-1) - y)/(2*C*(6 - 3*y + 3*C*(5*y-8)) + 4*C**3*(13 - 11*y + C*(3*y-2) + 2*C**2*(1+y)) + 3*(1-2*C)**2*(2 - y + 2*C*(y-1))*log(1-2*C))
    return {'n': nstr(n), 'b': nstr(b), 'mass': nstr(m, 20), 'baryonMass': nstr(mbary, 20), 'radius': nstr(r, 20), 'momentOfInertia': nstr(I, 18), 'loveNumber': nstr(k2, 16)}

def conv_list(X, Y, count):
    return [sum(X[j]*Y[k-j] for j in range(max(0, k-len(Y)+1), min(k, len(X)-1)+1)) for k in range(count)]

out['relativistic'] = []
for n, b in [('1', '0.01'), ('1', '0.1'), ('1', '0.3'), ('1.5', '0.05'), ('0.75', '0.2'), ('2', '0.001')]:
    out['relativistic'].append(star(n, b)); print(n, b, out['relativistic'][-1], file=sys.stderr, flush=True)
print(json.dumps(out))
`;

const text = execFileSync("python3", ["-c", program], { encoding: "utf8", stdio: ["ignore", "pipe", "inherit"] });
const about = "mpmath 1.3.0, Taylor series in the radius; made by test/generators/stars-mpmath.mjs";
const file = new URL("../fixtures/stars-mpmath.json", import.meta.url);
writeFileSync(file, `${JSON.stringify({ about, ...JSON.parse(text) }, null, 1)}\n`);
