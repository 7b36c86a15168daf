namespace CouplingWatch.Components.Formatting;

/// <summary>Fitting sentences together. Every member is pure.</summary>
public static class Sentences
{
    /// <summary>The sentence, to go on after a colon: its first letter small, unless it begins with an abbreviation or a name in capitals.</summary>
    public static string After(string text)
    {
        ArgumentNullException.ThrowIfNull(text);
        return text.Length > 1 && char.IsUpper(text[0]) && !char.IsUpper(text[1]) ? char.ToLowerInvariant(text[0]) + text[1..] : text;
    }

    /// <summary>The phrase as a sentence: its first letter large, a full stop at its end.</summary>
    public static string Whole(string phrase)
    {
        ArgumentNullException.ThrowIfNull(phrase);
        var text = phrase.Trim();
        if (text.Length == 0) return "";
        return char.ToUpperInvariant(text[0]) + text[1..] + (text[^1] is '.' or '!' or '?' or ':' ? "" : ".");
    }

    /// <summary>The phrase with a full stop at its end.</summary>
    public static string Stopped(string phrase)
    {
        ArgumentNullException.ThrowIfNull(phrase);
        return phrase.Length == 0 || phrase[^1] is '.' or '!' or '?' ? phrase : phrase + ".";
    }
}
