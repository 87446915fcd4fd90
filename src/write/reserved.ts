/** Names that a symbol must not take in numeric text: the public names of the mpmath library (version 1.3.0), the keywords of Python, and the built-in functions that expressions may use. */
const MPMATH = `
ComplexResult FPContext LU_decomp L_solve MPContext MPIntervalContext NoConvergence THETA_Q_LIM U_solve absmax absmin acos acosh acot acoth acsc acsch adaptive_extrapolation agm agm1 airyai airyaizero
airybi airybizero almosteq altzeta angerj apery appellf1 appellf2 appellf3 appellf4 arange arg asec asech asin asinh atan atan2 atanh autoprec backlunds bad_domain barnesg bei bell ber bernfrac
bernoulli bernpoly besseli besselj besseljzero besselk bessely besselyzero beta betainc bihyper binomial calculus catalan cbrt ceil chebyfit chebyt chebyu chi cholesky cholesky_solve chop ci clcos
clone clsin cohen_alt cond conj conjugate constant convert cos cos_sin cosh cosm cospi cospi_sinpi cot coth coulombc coulombf coulombg cplot csc csch ctx_base ctx_fp ctx_iv ctx_mp ctx_mp_python
cyclotomic default default_color_function defined_functions degree degrees det diag diff difference differint diffs diffs_exp diffs_prod diffun digamma dirichlet doctests dps e e1 ei eig eig_sort eigh
eighe eigsy ellipe ellipf ellipfun ellipk ellippi elliprc elliprd elliprf elliprg elliprj eps erf erfc erfi erfinv eta euler eulernum eulerpoly exp expint expj expjpi expm expm1 extend extradps
extraprec eye fabs fac fac2 factorial fadd fdiv fdot ff fib fibonacci findpoly findroot floor fmod fmul fneg fourier fourierval fp fprod frac fraction fresnelc fresnels frexp fsub fsum function_docs
functions gamma gammainc gammaprod gauss_quadrature gegenbauer glaisher grampoint hankel1 hankel2 harmonic hermite hessenberg hilbert householder hurwitz hyp0f1 hyp1f1 hyp1f2 hyp2f0 hyp2f1 hyp2f2
hyp2f3 hyp3f2 hyp_summators hyper hyper2d hypercomb hyperfac hyperu hypot hypsum identification identify im improve_solution inf init_builtins inverse invertlaplace invlapcohen invlapdehoog
invlapstehfest invlaptalbot isfinite isinf isint isnan isnormal isnpint isprime iv j j0 j1 jacobi jacobian jtheta kei ker kfrom khinchin kleinj laguerre lambertw ldexp legendre legenp legenq lerchphi
levin li libmp limit linspace list_primes ln ln10 ln2 log log10 log1p loggamma logm lommels1 lommels2 lu lu_solve lu_solve_mat mag make_mpc make_mpf mangoldt math2 matrices matrix maxcalls meijerg
memoize mertens mfrom mnorm moebius monitor mp mpc mpf mpi mpmathify mpq mul_accurately multiplicity nan ncdf ninf nint nint_distance norm npconvert npdf nprint nprod nstr nsum nthroot nzeros odefun
oldzetazero one ones pade pcfd pcfu pcfv pcfw phase phase_color_function phi pi plot plot_ignore polar polyexp polygamma polylog polyroots polyval power powm powm1 prec pretty primepi primepi2
primezeta psi pslq qbarfrom qfac qfrom qgamma qhyper qp qr qr_solve quad quadgl quadosc quadsubdiv quadts radians rand randmatrix rational re rect residual rf rgamma richardson riemannr root rs_z
rs_zeta runtests sawtoothw schur scorergi scorerhi sec sech secondzeta shanks shi si siegeltheta siegelz sigmoid sign sin sinc sincpi sinh sinm sinpi spherharm splot sqrt sqrtm square_exp_arg squarew
stieltjes stirling1 stirling2 struveh struvel sum_accurately sumap sumem superfac svd svd_c svd_r swap_row tan tanh taufrom taylor timing to_fixed trap_complex trianglew twinprime types unit_triangle
unitroots unitvector usertools verbose visualization warn webere whitm whitw workdps workprec zero zeros zeta zetazero zetazero_memoized
`;
const PYTHON =
  'False None True and as assert async await break class continue def del elif else except finally for from global if import in is lambda nonlocal not or pass raise return try while with yield _ case match I abs complex float int max min pow round sum print range list map filter zip len id hex oct bin bool str set dict tuple type vars input open eval exec';

export const RESERVED_NUMERIC: ReadonlySet<string> = new Set(`${MPMATH} ${PYTHON}`.split(/\s+/).filter((name) => name !== ''));
