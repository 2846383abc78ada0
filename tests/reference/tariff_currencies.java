import java.util.*;
public class C { public static void main(String[] a){ TreeMap<String,Integer> m=new TreeMap<>(); for(Currency c: Currency.getAvailableCurrencies()) m.put(c.getCurrencyCode(), c.getDefaultFractionDigits()); 
for (var e: m.entrySet()) System.out.print(e.getKey()+":"+e.getValue()+" "); 
TreeSet<String> act=new TreeSet<>(); for (String cc: Locale.getISOCountries()) { try { Currency c=Currency.getInstance(new Locale("",cc)); if(c!=null) act.add(c.getCurrencyCode()); } catch(Exception e){} }
System.out.println(); System.out.println(act.size()+" "+act); System.out.println(System.getProperty("java.version"));}}
