package interval

// Constants as sums of float64 numbers. The tests verify each of them against
// a multiprecision value.

const (
	ln2a   = 0x1.62e42fefa39efp-1
	ln2b   = 0x1.abc9e3b39803fp-56 // the rest is below 2^-110 in magnitude
	invLn2 = 0x1.71547652b82fep+0

	halfPiA   = 0x1.921fb54442d18p+0
	halfPiB   = 0x1.1a62633145c07p-54
	halfPiC   = -0x1.f1976b7ed8fbcp-110 // the rest is below 2^-163
	twoOverPi = 0x1.45f306dc9c883p-1

	twoOverRootPiA = 0x1.20dd750429b6dp+0
	twoOverRootPiB = 0x1.1ae3a914fed80p-56 // the rest is below 2^-110
)

// expHead holds the first coefficients of the exponential series.
var expHead = [...]ball{
	{0x1.p+0, 0x0.0p+0, 0},                                    // 1/0!
	{0x1.p+0, 0x0.0p+0, 0},                                    // 1/1!
	{0x1.p-1, 0x0.0p+0, 0},                                    // 1/2!
	{0x1.5555555555555p-3, 0x1.5555555555555p-57, 0x1p-109},   // 1/3!
	{0x1.5555555555555p-5, 0x1.5555555555555p-59, 0x1p-111},   // 1/4!
	{0x1.1111111111111p-7, 0x1.1111111111111p-63, 0x1p-113},   // 1/5!
	{0x1.6c16c16c16c17p-10, -0x1.f49f49f49f49fp-65, 0x1p-116}, // 1/6!
}

// expTail holds the following coefficients, to 1/13!, rounded.
var expTail = [...]float64{
	0x1.a01a01a01a01ap-13, // 1/7!
	0x1.a01a01a01a01ap-16, // 1/8!
	0x1.71de3a556c734p-19, // 1/9!
	0x1.27e4fb7789f5cp-22, // 1/10!
	0x1.ae64567f544e4p-26, // 1/11!
	0x1.1eed8eff8d898p-29, // 1/12!
	0x1.6124613a86d09p-33, // 1/13!
}

// oddHead holds the first coefficients of the series of sinh(x)/x in x^2.
var oddHead = [...]ball{
	{0x1.p+0, 0x0.0p+0, 0},                                    // 1/1!
	{0x1.5555555555555p-3, 0x1.5555555555555p-57, 0x1p-109},   // 1/3!
	{0x1.1111111111111p-7, 0x1.1111111111111p-63, 0x1p-113},   // 1/5!
	{0x1.a01a01a01a01ap-13, 0x1.a01a01a01a01ap-73, 0x1p-119},  // 1/7!
	{0x1.71de3a556c734p-19, -0x1.c154f8ddc6c00p-73, 0x1p-125}, // 1/9!
	{0x1.ae64567f544e4p-26, -0x1.c062e06d1f209p-80, 0x1p-132}, // 1/11!
	{0x1.6124613a86d09p-33, 0x1.f28e0cc748ebep-87, 0x1p-139},  // 1/13!
	{0x1.ae7f3e733b81fp-41, 0x1.1d8656b0ee8cbp-97, 0x1p-147},  // 1/15!
}

// oddTail holds the following coefficients, to 1/27!, rounded.
var oddTail = [...]float64{
	0x1.952c77030ad4ap-49, // 1/17!
	0x1.2f49b46814157p-57, // 1/19!
	0x1.71b8ef6dcf572p-66, // 1/21!
	0x1.761b41316381ap-75, // 1/23!
	0x1.3f3ccdd165fa9p-84, // 1/25!
	0x1.d1ab1c2dccea3p-94, // 1/27!
}

// evenHead holds the first coefficients of the series of cosh(x) in x^2.
var evenHead = [...]ball{
	{0x1.p+0, 0x0.0p+0, 0},                                    // 1/0!
	{0x1.p-1, 0x0.0p+0, 0},                                    // 1/2!
	{0x1.5555555555555p-5, 0x1.5555555555555p-59, 0x1p-111},   // 1/4!
	{0x1.6c16c16c16c17p-10, -0x1.f49f49f49f49fp-65, 0x1p-116}, // 1/6!
	{0x1.a01a01a01a01ap-16, 0x1.a01a01a01a01ap-76, 0x1p-122},  // 1/8!
	{0x1.27e4fb7789f5cp-22, 0x1.cbbc05b4fa99ap-76, 0x1p-128},  // 1/10!
	{0x1.1eed8eff8d898p-29, -0x1.2aec959e14c06p-83, 0x1p-135}, // 1/12!
	{0x1.93974a8c07c9dp-37, 0x1.05d6f8a2efd1fp-92, 0x1p-143},  // 1/14!
}

// evenTail holds the following coefficients, to 1/26!, rounded.
var evenTail = [...]float64{
	0x1.ae7f3e733b81fp-45, // 1/16!
	0x1.6827863b97d97p-53, // 1/18!
	0x1.e542ba4020225p-62, // 1/20!
	0x1.0ce396db7f853p-70, // 1/22!
	0x1.f2cf01972f578p-80, // 1/24!
	0x1.88e85fc6a4e5ap-89, // 1/26!
}
