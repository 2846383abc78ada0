// Reference for the table of currencies in src/units/money.rs: every ISO 4217 code that OpenJDK gives to a country, with
// its digits. Made with OpenJDK 17.0.15: java tariff_currencies.java > tariff_currencies.csv
import java.util.Currency;
import java.util.Locale;
import java.util.TreeSet;

class TariffCurrencies {
    public static void main(String[] arguments) {
        var codes = new TreeSet<String>();
        for (String country : Locale.getISOCountries()) {
            Currency currency = Currency.getInstance(new Locale("", country));
            if (currency != null) {
                codes.add(currency.getCurrencyCode());
            }
        }
        System.out.println("code,digits");
        for (String code : codes) {
            System.out.println(code + "," + Currency.getInstance(code).getDefaultFractionDigits());
        }
    }
}
