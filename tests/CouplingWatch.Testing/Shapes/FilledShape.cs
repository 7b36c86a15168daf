using System.Collections;
using System.Reflection;
using System.Text.Json.Nodes;
using CouplingWatch.Records;

namespace CouplingWatch.Testing.Shapes;

/// <summary>Makes an instance of a shape with every public member set to something other than its default, so that a round trip cannot miss one.</summary>
public static class FilledShape
{
    public static object Of(Type type) => Make(type, new Counter());

    private static object Make(Type type, Counter counter)
    {
        var n = counter.Next();
        if (Nullable.GetUnderlyingType(type) is { } inner) return Make(inner, counter);
        if (type == typeof(string)) return $"text {n} – ‖r‖ <ü>";
        if (type == typeof(bool)) return true;
        if (type == typeof(int)) return n;
        if (type == typeof(long)) return (1L << 40) + n;
        if (type == typeof(double)) return n / 7.0;
        if (type == typeof(DateTimeOffset)) return new DateTimeOffset(2026, 12, 1, 8, 0, 0, TimeSpan.FromHours(1)).AddMilliseconds(n);
        if (type.IsEnum) return Enum.GetValues(type).GetValue(Enum.GetValues(type).Length - 1)!;
        if (type == typeof(JsonObject)) return new JsonObject { ["number"] = n / 3.0, ["inner"] = new JsonObject { ["list"] = new JsonArray("a", n) } };
        if (type == typeof(NamedValues)) return NamedValues.Of(("deflection", n / 3.0), ("wall", double.NaN), ("far", double.NegativeInfinity));
        if (type.IsArray) return MakeArray(type.GetElementType()!, counter);
        if (type.IsGenericType && type.GetGenericTypeDefinition() == typeof(IReadOnlyList<>)) return MakeArray(type.GenericTypeArguments[0], counter);
        if (type.IsGenericType && type.GetGenericTypeDefinition() == typeof(IReadOnlyDictionary<,>)) return MakeDictionary(type, counter);
        return MakeObject(type, counter);
    }

    private static Array MakeArray(Type element, Counter counter)
    {
        var array = Array.CreateInstance(element, 2);
        for (var i = 0; i < 2; i++) array.SetValue(Make(element, counter), i);
        return array;
    }

    private static IDictionary MakeDictionary(Type type, Counter counter)
    {
        var map = (IDictionary)Activator.CreateInstance(typeof(Dictionary<,>).MakeGenericType(type.GenericTypeArguments))!;
        map["firstKey"] = Make(type.GenericTypeArguments[1], counter);
        map["thickness_mm"] = Make(type.GenericTypeArguments[1], counter);
        return map;
    }

    private static object MakeObject(Type type, Counter counter)
    {
        var constructor = type.GetConstructors().OrderByDescending(c => c.GetParameters().Length).First();
        var arguments = constructor.GetParameters().Select(p => Make(p.ParameterType, counter)).ToArray();
        var made = constructor.Invoke(arguments);
        foreach (var property in type.GetProperties(BindingFlags.Public | BindingFlags.Instance))
        {
            if (!property.CanWrite || property.GetIndexParameters().Length > 0) continue;
            if (constructor.GetParameters().Any(p => p.Name == property.Name)) continue;
            property.SetValue(made, Make(property.PropertyType, counter));
        }
        return made;
    }

    private sealed class Counter
    {
        private int value;

        public int Next() => ++value;
    }
}
