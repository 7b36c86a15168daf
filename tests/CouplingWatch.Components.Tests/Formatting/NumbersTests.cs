using CouplingWatch.Components.Formatting;
using CsCheck;

namespace CouplingWatch.Components.Tests.Formatting;

public sealed class NumbersTests
{
    [Theory]
    [InlineData(0.0, 3, "0")]
    [InlineData(0.197, 3, "0.197")]
    [InlineData(0.3, 3, "0.300")]
    [InlineData(2381.0, 4, "2,381")]
    [InlineData(-2381.4, 2, "−2,400")]
    [InlineData(0.99996, 3, "1.00")]
    [InlineData(1e-4, 3, "10⁻⁴")]
    [InlineData(3.14159e-4, 2, "3.1 × 10⁻⁴")]
    [InlineData(1234567.0, 3, "1.23 × 10⁶")]
    [InlineData(999999.9, 3, "1.00 × 10⁶")]
    public void A_number_keeps_its_significant_digits(double value, int digits, string text) => Assert.Equal(text, Numbers.Sig(value, digits));

    [Fact]
    public void What_is_no_number_is_said_in_words()
    {
        Assert.Equal("—", Numbers.Sig(null));
        Assert.Equal("not a number", Numbers.Sig(double.NaN));
        Assert.Equal("infinite", Numbers.Power(double.PositiveInfinity));
        Assert.Equal("minus infinite", Numbers.Fixed(double.NegativeInfinity));
        Assert.Equal("—", Numbers.Percent(null));
        Assert.Equal("—", Numbers.NodeHours(null));
    }

    [Theory]
    [InlineData(1e-2, "10⁻²")]
    [InlineData(1.0, "10⁰")]
    [InlineData(2.5e-7, "2.5 × 10⁻⁷")]
    [InlineData(-1e3, "−1.0 × 10³")]
    [InlineData(0.0, "0")]
    public void A_power_of_ten_is_written_with_raised_digits(double value, string text) => Assert.Equal(text, Numbers.Power(value));

    [Fact]
    public void Counts_carry_thousands_and_their_noun()
    {
        Assert.Equal("100,000", Numbers.Count(100_000));
        Assert.Equal("1 node", Numbers.Count(1, "node"));
        Assert.Equal("2 passes", Numbers.Count(2, "pass", "passes"));
        Assert.Equal("twelve", Numbers.Word(12));
        Assert.Equal("13", Numbers.Word(13));
    }

    [Theory]
    [InlineData(144.2, "144 node-h")]
    [InlineData(9.04, "9.0 node-h")]
    [InlineData(9.96, "10 node-h")]
    [InlineData(0.04, "< 0.1 node-h")]
    [InlineData(0.0, "0 node-h")]
    public void Node_hours_are_no_finer_than_they_are_known(double hours, string text) => Assert.Equal(text, Numbers.NodeHours(hours));

    [Theory]
    [InlineData(0.42, "42 %")]
    [InlineData(0.004, "< 1 %")]
    [InlineData(0.996, "> 99 %")]
    [InlineData(1.0, "100 %")]
    public void A_share_is_never_rounded_to_certainty(double share, string text) => Assert.Equal(text, Numbers.Percent(share));

    [Fact]
    public void A_unit_is_held_to_its_number()
    {
        Assert.Equal("3.00\u00a0m", Numbers.WithUnit(3, "m"));
        Assert.Equal("—", Numbers.WithUnit(null, "m"));
        Assert.Equal("3.00", Numbers.WithUnit(3, null));
    }

    [Fact]
    public void Coordinates_never_carry_an_exponent_or_a_lone_minus() =>
        Gen.Double[-1e6, 1e6].Sample(v =>
        {
            var text = Numbers.Plain(v);
            Assert.DoesNotContain('E', text);
            Assert.NotEqual("-0", text);
            Assert.Equal(v, double.Parse(text, System.Globalization.CultureInfo.InvariantCulture), 0.0501);
        });

    [Fact]
    public void A_wrong_count_of_digits_is_refused_at_the_door() =>
        Assert.Equal("digits", Assert.Throws<ArgumentOutOfRangeException>(() => Numbers.Sig(1, 0)).ParamName);
}
